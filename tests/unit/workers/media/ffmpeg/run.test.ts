import { execa } from 'execa'
import { readFile } from 'node:fs/promises'
import { describe, expect, it, vi } from 'vitest'
import { localFile, pipeName, runFfmpeg, RunError, runFfprobe } from '../../../../../workers/media/ffmpeg/run'
import { makeClip } from '../../../../support/clips'

const endless = ['-re', '-f', 'lavfi', '-i', 'testsrc2=s=64x64:r=5', '-f', 'null', '-']

vi.setConfig({ testTimeout: 120_000 })

describe('runFfmpeg', () => {
  it('returns what is written to standard output and feeds extra pipes', async () => {
    let sound = 0
    const { stdout } = await runFfmpeg(
      ['-f', 'lavfi', '-i', 'color=s=4x4:r=1:d=2', '-f', 'lavfi', '-i', 'sine=d=1:r=8000',
        '-map', '0', '-pix_fmt', 'gray', '-f', 'rawvideo', 'pipe:1', '-map', '1', '-f', 's16le', pipeName(0)],
      { extraPipes: [(chunk) => { sound += chunk.length }] },
    )
    expect(stdout.length).toBe(2 * 16)
    expect(sound).toBe(16_000)
  })

  it('reports how far it has come', async () => {
    const positions: number[] = []
    await runFfmpeg(['-f', 'lavfi', '-i', 'color=s=16x16:r=10:d=3', '-f', 'null', '-'], { onProgress: ms => positions.push(ms) })
    expect(positions.at(-1)).toBe(3000)
  })

  it('ends with the reason of the signal that stopped it', async () => {
    const stop = new AbortController()
    const run = runFfmpeg(endless, { signal: stop.signal })
    stop.abort(new Error('the job was cancelled'))
    await expect(run).rejects.toThrow('the job was cancelled')
  })

  it('does not start after the signal has fired', async () => {
    await expect(runFfmpeg(endless, { signal: AbortSignal.abort(new Error('too late')) })).rejects.toThrow('too late')
  })

  it.each([
    ['timed-out', { timeoutMs: 300 }, endless],
    ['too-much-output', { maxStdoutBytes: 1000 }, ['-f', 'lavfi', '-i', 'testsrc2=s=64x64', '-f', 'rawvideo', 'pipe:1']],
    ['out-of-memory', { memoryBytes: 150_000_000 }, endless],
    ['failed', {}, ['-i', 'file:/nonexistent/clip', '-f', 'null', '-']],
  ] as const)('tells %s apart', async (reason, options, args) => {
    const error = await runFfmpeg([...args], options).catch((error: unknown) => error)
    expect(error).toBeInstanceOf(RunError)
    expect((error as RunError).reason).toBe(reason)
  })

  it('leaves nothing running when the process that started it is killed', async () => {
    const script = `import { runFfmpeg } from '${new URL('../../../../../workers/media/ffmpeg/run.ts', import.meta.url).pathname}'
      runFfmpeg(${JSON.stringify(endless)}); setInterval(async () => {
        const { readFile } = await import('node:fs/promises')
        const pids = (await readFile('/proc/self/task/' + process.pid + '/children', 'utf8')).trim().split(' ')
        for (const pid of pids) if (/^ffmpeg/.test(await readFile('/proc/' + pid + '/cmdline', 'utf8').catch(() => ''))) console.log(pid)
      }, 50)`
    const parent = execa('node', ['--import', 'tsx', '--input-type=module', '-e', script], { reject: false })
    const child = await new Promise<string>(resolve => parent.stdout.once('data', chunk => resolve(String(chunk).trim().split('\n')[0]!)))
    parent.kill('SIGKILL')
    await parent
    await expect.poll(() => readFile(`/proc/${child}/cmdline`, 'utf8').catch(() => ''), { timeout: 10_000 }).toBe('')
  }, 30_000)
})

describe('limits on input', () => {
  it('takes absolute paths only, and takes them literally', () => {
    expect(() => localFile('-i')).toThrow(TypeError)
    expect(localFile('/clips/%d concat:a|b.mp4')).toBe('file:/clips/%d concat:a|b.mp4')
  })

  it('does not open what a playlist points at', async () => {
    const error = await runFfprobe(await makeClip('playlist-file'), ['-show_format']).catch((error: unknown) => error)
    expect((error as RunError).stderr).toMatch(/not on whitelist/i)
  })
})
