import { existsSync } from 'node:fs'
import { performance } from 'node:perf_hooks'
import { type DatabaseHandle, openDatabase } from '#server/database/client'
import { search } from '#server/services/search/search'
import { searchSchema } from '#shared/schemas/search'
import { startTestServer } from '../support/database'
import { type Corpus, fillCorpus } from './searchCorpus'
import { serveSite } from './searchSite'

interface Asked { kind: string, q: string, build?: string, as: string | null, words: string[] }

/** Search over 1,000,000 captions against ILIKE on the same database in the same run. `node --import tsx tests/measure/search.ts [cues]` */
export async function measureSearch(cues = 1_000_000) {
  const server = await startTestServer()
  const handle = openDatabase(server.url, { max: 4 })
  try {
    const began = performance.now()
    const corpus = await fillCorpus(handle.pool, { cues })
    const loadSeconds = Math.round((performance.now() - began) / 1000)
    return { loadSeconds, ...await measureCorpus(handle, server.url, corpus) }
  }
  finally {
    await handle.close()
    await server.stop()
  }
}

/** The questions on a filled database: how long its statements take, the whole search, and ILIKE. */
export async function measureCorpus(handle: DatabaseHandle, url: string, corpus: Corpus) {
  const asked = questions(corpus)
  const inDatabase = timeQueries(handle.pool)
  const times: { kind: string, q: string, database: number, service: number, found: number }[] = []
  for (const round of [0, 1, 2]) {
    for (const one of asked) {
      inDatabase.reset()
      const start = performance.now()
      const answer = await search(handle.database, one.as, searchSchema.parse({ q: one.q, build: one.build }))
      // The first round fills the caches that a running site has anyway.
      if (round) times.push({ kind: one.kind, q: one.q, database: inDatabase.ms(), service: performance.now() - start, found: answer.count })
    }
  }
  const ilike: number[] = []
  for (const one of asked.filter((_, i) => i % 4 === 0)) {
    const start = performance.now()
    await handle.pool.query(`select id, clip_id, start_ms from cues where ($1::uuid is null or build_id = $1) and text ilike all ($2::text[]) order by clip_id, start_ms limit 20`, [one.build ?? null, one.words.map(word => `%${word}%`)])
    ilike.push(performance.now() - start)
  }
  const http = await overHttp(url, asked)
  const kinds = [...new Set(times.map(time => time.kind))].map((kind) => {
    const own = times.filter(time => time.kind === kind)
    return { kind, asked: own.length, databaseP50: p(own.map(t => t.database), 50), databaseP95: p(own.map(t => t.database), 95), serviceP95: p(own.map(t => t.service), 95), found: Math.round(own.reduce((sum, t) => sum + t.found, 0) / own.length) }
  })
  const slowest = times.sort((a, b) => b.database - a.database).slice(0, 5)
  return {
    cues: corpus.cues, passages: corpus.passages, kinds, slowest,
    databaseP50: p(times.map(t => t.database), 50), databaseP95: p(times.map(t => t.database), 95), serviceP95: p(times.map(t => t.service), 95), http,
    ilikeP50: p(ilike, 50), ilikeP95: p(ilike, 95), ratioP95: Number((p(times.map(t => t.database), 95) / p(ilike, 95)).toFixed(4)),
  }
}

/** Questions of every sort: by part and operation, one common word, rare words, slips, many words; of one build and of all. */
function questions(corpus: Corpus): Asked[] {
  const [large, small] = [corpus.builds[0]!, corpus.builds[4]!]
  const owner = large.ownerId
  const list: Asked[] = []
  const rare = (i: number) => corpus.words[3000 + i * 97]!
  const common = (i: number) => corpus.words[i * 3]!
  const scopes: [string, string | undefined, string | null][] = [['large build', large.id, owner], ['large build, guest', large.id, null], ['small build', small.id, owner], ['all builds', undefined, owner], ['all builds, guest', undefined, null]]
  for (const [scope, build, as] of scopes) {
    const add = (kind: string, q: string, words: string[]) => list.push({ kind: `${scope}: ${kind}`, q, build, as, words })
    for (let i = 0; i < 8; i++) {
      const part = large.parts[i]!.name
      add('part and operation', `how was the ${part} ${['glued', 'cut', 'fastened', 'painted'][i % 4]}`, [part.split(' ').at(-1)!, ['glu', 'cut', 'screw', 'paint'][i % 4]!])
      add('one common word', common(i), [common(i)])
      add('rare word', rare(i), [rare(i)])
      add('common and rare', `${common(i)} ${rare(i + 9)}`, [common(i), rare(i + 9)])
      add('three common words', [common(i), common(i + 8), common(i + 16)].join(' '), [common(i), common(i + 8), common(i + 16)])
      add('slip of the pen', `${rare(i).slice(0, 3)}x${rare(i).slice(3)} ${part}`, [part.split(' ').at(-1)!])
    }
    add('ten words', Array.from({ length: 10 }, (_, i) => common(i * 7)).join(' '), [common(0)])
    add('nothing there', 'zzyzzyva quixotry', ['zzyzzyva'])
  }
  return list
}

/** Adds up the time that statements spend between being sent and being answered. */
function timeQueries(pool: import('pg').Pool) {
  let total = 0
  pool.on('connect', client => wrap(client))
  const wrapped = new WeakSet<object>()
  function wrap(client: object) {
    if (wrapped.has(client)) return
    wrapped.add(client)
    const target = client as { query: (...args: unknown[]) => unknown }
    const query = target.query.bind(target)
    target.query = (...args) => {
      const start = performance.now()
      const result = query(...args)
      if (result instanceof Promise) return result.finally(() => total += performance.now() - start)
      return result
    }
  }
  pool.on('acquire', client => wrap(client))
  return { reset: () => total = 0, ms: () => total }
}

async function overHttp(databaseUrl: string, asked: Asked[]): Promise<{ p50: number, p95: number } | string> {
  if (!existsSync('.output/server/index.mjs')) return 'not measured: build the site first (npm run build)'
  const site = await serveSite(databaseUrl)
  try {
    const times: number[] = []
    for (const round of [0, 1]) {
      for (const one of asked.filter(one => one.as === null)) {
        const start = performance.now()
        const answer = await fetch(`${site.url}/api/search?${new URLSearchParams({ q: one.q, ...one.build ? { build: one.build } : {} })}`)
        await answer.json()
        if (!answer.ok) throw new Error(`${answer.status} for “${one.q}”`)
        if (round) times.push(performance.now() - start)
      }
    }
    return { p50: p(times, 50), p95: p(times, 95) }
  }
  finally {
    await site.stop()
  }
}

function p(values: number[], percent: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return Number((sorted[Math.min(sorted.length - 1, Math.ceil(sorted.length * percent / 100) - 1)] ?? 0).toFixed(1))
}

if (process.argv[1]?.endsWith('measure/search.ts')) console.log(JSON.stringify(await measureSearch(Number(process.argv[2] ?? 1_000_000)), null, 2))
