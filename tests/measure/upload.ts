import { createReadStream, readFileSync, statSync } from 'node:fs'
import { request as httpRequest } from 'node:http'
import { join } from 'node:path'
import { PutObjectCommand, S3Client } from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { chromium } from '@playwright/test'
import { demoBuild } from '../../workers/demo/index'
import { commandLine, sleep } from '../../workers/local/processes'
import { CHROMIUM } from '../support/chromium'
import { startProduct } from '../support/startProduct'
import type { Figure } from './figures'

/**
 * A clip of about 1 GB dropped on a session page in Chromium, against one client that PUTs the same bytes to the same
 * storage. Peak memory of site and worker over upload and indexing is read from the kernel (VmHWM).
 */
export async function measureUpload(clipPath: string): Promise<Figure[]> {
  const product = await startProduct()
  const browser = await chromium.launch(CHROMIUM)
  try {
    const { size } = statSync(clipPath)
    const plain = await plainPut(product.dataDir, clipPath, size)
    const context = await browser.newContext({ baseURL: product.url })
    const headers = { origin: new URL(product.url).origin }
    await context.request.post('/api/auth/sign-in', { data: demoBuild.builder, headers })
    const { builds } = await (await context.request.get('/api/builds')).json() as { builds: { id: string }[] }
    const { id } = await (await context.request.post(`/api/builds/${builds[0]!.id}/sessions`, { data: { date: '2026-11-07' }, headers })).json() as { id: string }
    const page = await context.newPage()
    await page.goto(`/builds/${builds[0]!.id}/sessions/${id}`)
    const picker = page.locator('input[data-picker=files]')
    await picker.waitFor({ state: 'attached' })
    const state = async () => ((await (await context.request.get(`/api/sessions/${id}`)).json()) as { clips: { state: string }[] }).clips[0]?.state
    const began = performance.now()
    await picker.setInputFiles(clipPath)
    // Watched in the page: asking the site ten times a second took a fifth of the machine from what is measured.
    await page.locator('aside[aria-label=Uploads] li[data-state=done]').waitFor({ state: 'attached', timeout: 10 * 60_000 })
    const ours = (performance.now() - began) / 1000
    while (!['ready', 'failed'].includes((await state())!)) await sleep(500)
    const outcome = await state()
    if (outcome !== 'ready') throw new Error(`The clip ended as ${outcome}.`)
    console.log(`upload of ${(size / 1e9).toFixed(2)} GB: ${ours.toFixed(1)} s from the page, ${plain.toFixed(1)} s by one plain PUT`)
    return [
      { name: 'upload from the page against one plain PUT of the same bytes (speed)', value: plain / ours, unit: '×', budget: 0.7, atLeast: true },
      { name: 'peak memory of the site over upload and indexing', value: peakMegabytes(product.dataDir, 'site'), unit: 'MB', budget: 300 },
      { name: 'peak memory of the worker over upload and indexing, without ffmpeg', value: peakMegabytes(product.dataDir, 'worker'), unit: 'MB', budget: 400 },
    ]
  }
  finally {
    await browser.close()
    await product.stop()
  }
}

// As in server/adapters/s3Storage.ts: the version is pinned.
process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED ??= 'true'

/** Seconds that one client takes to PUT the file to the product's storage in one request. */
async function plainPut(dataDir: string, path: string, size: number): Promise<number> {
  const secrets = JSON.parse(readFileSync(join(dataDir, 'secrets.json'), 'utf8')) as { storageKeyId: string, storageSecret: string, ports: { storage: number } }
  const client = new S3Client({ endpoint: `http://127.0.0.1:${secrets.ports.storage}`, region: 'us-east-1', forcePathStyle: true, requestChecksumCalculation: 'WHEN_REQUIRED', credentials: { accessKeyId: secrets.storageKeyId, secretAccessKey: secrets.storageSecret } })
  const url = await getSignedUrl(client, new PutObjectCommand({ Bucket: 'ribband', Key: 'measure/plain' }), { expiresIn: 3600 })
  const began = performance.now()
  await new Promise<void>((resolve, reject) => {
    const put = httpRequest(url, { method: 'PUT', headers: { 'content-length': size } }, (response) => {
      response.resume().on('end', () => response.statusCode === 200 ? resolve() : reject(new Error(`PUT answered ${response.statusCode}`)))
    })
    put.on('error', reject)
    createReadStream(path, { highWaterMark: 1 << 20 }).pipe(put)
  })
  client.destroy()
  return (performance.now() - began) / 1000
}

/** Peak resident memory of a child since it started, MB. */
export function peakMegabytes(dataDir: string, child: 'site' | 'worker'): number {
  const pid = Number(readFileSync(join(dataDir, 'run', child), 'utf8'))
  if (!commandLine(pid)) throw new Error(`${child} is not running`)
  return Number(/VmHWM:\s+(\d+) kB/.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))![1]) / 1000
}
