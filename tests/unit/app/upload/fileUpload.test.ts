import { describe, expect, it } from 'vitest'
import { FileUpload } from '../../../../app/utils/upload/fileUpload'
import { Slots } from '../../../../app/utils/upload/slots'
import type { UploadProgress, UploadState } from '../../../../app/utils/upload/types'
import { bigFile, makeOutside, PART, PartProblem, problem } from './outside'

function make(size = 5 * PART) {
  const { world, outside } = makeOutside(size)
  const seen: UploadState[] = []
  const sent: number[] = []
  const upload = new FileUpload(bigFile(size), outside, { files: new Slots(2), parts: new Slots(4) }, (progress: UploadProgress) => {
    if (seen.at(-1) !== progress.state) seen.push(progress.state)
    sent.push(progress.sentBytes)
  })
  return { world, upload, seen, sent }
}

describe('one file', () => {
  it('is looked at, sent in parts and finished', async () => {
    const { world, upload, seen, sent } = make()
    await upload.run()
    expect(seen).toEqual(['waiting', 'checking', 'sending', 'finishing', 'done'])
    expect([...world.stored.keys()].sort()).toEqual([1, 2, 3, 4, 5])
    expect(upload.progress).toMatchObject({ clipId: 'clip-1', sentBytes: 5 * PART, message: '' })
    expect(Math.max(...sent)).toBe(5 * PART)
  })

  it('has at most four parts in flight, however large it is', async () => {
    const { world, upload } = make(40 * PART)
    await upload.run()
    expect(world.mostInFlight).toBe(4)
    expect(world.stored.size).toBe(40)
  })

  it('sums each part while it is being sent', async () => {
    const { world, upload } = make(PART)
    let put = () => {}
    const begunPut = new Promise<void>(resolve => put = resolve)
    // Were one to wait for the other, this would never end.
    world.beforeHash = () => begunPut
    world.beforePut = () => put()
    await upload.run()
    expect(upload.progress.state).toBe('done')
  })

  it('that can no longer be read stops, though its part is on its way', async () => {
    const { world, upload } = make(PART)
    world.beforeHash = () => {
      throw new DOMException('gone', 'NotReadableError')
    }
    world.beforePut = (_part, signal) => new Promise((_resolve, reject) => signal.addEventListener('abort', () => reject(signal.reason)))
    await upload.run()
    expect(upload.progress).toMatchObject({ state: 'failed', message: expect.stringContaining('cannot be read any more') as string })
    expect(world.stored.size).toBe(0)
  })

  it('sends only what the storage has not', async () => {
    const { world, upload } = make()
    for (const part of [1, 2, 4]) world.stored.set(part, `etag-${part}`)
    await upload.run()
    expect(world.puts).toBe(2)
    expect(upload.progress.state).toBe('done')
  })

  it('pauses at once, keeps what was sent and goes on where it stopped', async () => {
    const { world, upload } = make()
    world.beforePut = (part) => {
      if (part === 3) upload.pause()
    }
    await upload.run()
    expect(upload.progress).toMatchObject({ state: 'paused', message: 'Paused. What was sent is kept.' })
    expect(world.stored.has(3)).toBe(false)
    world.beforePut = () => {}
    const before = world.puts
    const missing = 5 - world.stored.size
    await upload.run()
    expect(upload.progress.state).toBe('done')
    expect(world.puts - before).toBe(missing)
  })

  it('is begun only once however often it is told to', async () => {
    const { world, upload } = make()
    await Promise.all([upload.run(), upload.run()])
    expect(world.log.filter(entry => entry === 'begin')).toHaveLength(1)
  })
})

describe('a bad line', () => {
  it('a part that fails is sent again after a growing wait', async () => {
    const { world, upload } = make()
    let failures = 3
    world.beforePut = (part) => {
      if (part === 2 && failures-- > 0) throw new PartProblem('refused', 500)
    }
    await upload.run()
    expect(upload.progress.state).toBe('done')
    const waits = world.log.flatMap(entry => entry.startsWith('slept') ? [Number(entry.slice(6))] : [])
    expect(waits).toHaveLength(3)
    expect(waits.every(wait => wait >= 500)).toBe(true)
  })

  it('waits for the line when the browser is offline, says so, and goes on', async () => {
    const { world, upload, seen } = make()
    let cut = true
    world.beforePut = (part) => {
      if (part !== 4 || !cut) return
      cut = false
      world.online = false
      throw new PartProblem('unreachable', 0)
    }
    await upload.run()
    expect(seen).toContain('offline')
    expect(upload.progress.state).toBe('done')
    expect(world.log).toContain('waited for the line')
  })

  it('asks for a new address when one is past its time', async () => {
    const { world, upload } = make()
    let expired = true
    world.beforePut = (part) => {
      if (part === 1 && expired) {
        expired = false
        throw new PartProblem('refused', 403)
      }
    }
    await upload.run()
    expect(upload.progress.state).toBe('done')
    expect(world.log.filter(entry => entry.startsWith('addresses 1'))).toHaveLength(2)
    expect(world.log.some(entry => entry.startsWith('slept'))).toBe(false)
  })

  it('gives up after many refusals with words, and can be told to go on', async () => {
    const { world, upload } = make()
    world.beforePut = () => {
      throw new PartProblem('refused', 507)
    }
    await upload.run()
    expect(upload.progress.state).toBe('failed')
    expect(upload.progress.message).toContain('What was sent is kept')
    world.beforePut = () => {}
    await upload.run()
    expect(upload.progress.state).toBe('done')
  })

  it('the site being away for a moment is waited out', async () => {
    const { world, upload } = make()
    let away = 2
    world.complete = () => {
      if (away-- > 0) throw problem(0)
    }
    await upload.run()
    expect(upload.progress.state).toBe('done')
    expect(world.log.filter(entry => entry === 'complete')).toHaveLength(3)
  })

  it('parts that the storage lost are sent again', async () => {
    const { world, upload } = make()
    let first = true
    world.complete = () => {
      if (!first) return
      first = false
      world.stored.delete(2)
      throw problem(409, '1 of 5 parts did not arrive whole.', { missing: [2] })
    }
    await upload.run()
    expect(upload.progress.state).toBe('done')
    expect(world.puts).toBe(6)
  })
})

describe('what is refused', () => {
  it('a file that is in the build already is compared and refused with where it is', async () => {
    const { world, upload } = make(2 * PART)
    const place = { clipId: 'other', sessionId: 'session-2', name: 'first.mp4' }
    world.begin = async (input) => {
      if (!input.contentHash) return { kind: 'hash-first', ...world.plan, candidate: place }
      throw problem(409, 'clip.mp4 is in this build already as first.mp4.', place)
    }
    await upload.run()
    expect(upload.progress).toMatchObject({ state: 'double', double: place, message: 'clip.mp4 is in this build already as first.mp4.' })
    expect(world.puts).toBe(0)
  })

  it('a file that only looks the same goes on, without being hashed twice', async () => {
    const { world, upload } = make(2 * PART)
    const begun = { kind: 'upload' as const, clipId: 'clip-1', ...world.plan, uploaded: [] }
    world.begin = async input => input.contentHash ? begun : { kind: 'hash-first', ...world.plan, candidate: { clipId: 'x', sessionId: 'y', name: 'z.mp4' } }
    await upload.run()
    expect(upload.progress.state).toBe('done')
    expect(world.log.filter(entry => entry.startsWith('begin'))).toEqual(['begin', 'begin with hash'])
  })

  it.each([[0, 'The file is empty'], [50_000_000_001, '50 GB at most']])('a file of %i bytes, before anything is asked', async (size, words) => {
    const { outside, world } = makeOutside(1000)
    const upload = new FileUpload(bigFile(size), outside, { files: new Slots(1), parts: new Slots(1) }, () => {})
    await upload.run()
    expect(upload.progress.state).toBe('failed')
    expect(upload.progress.message).toContain(words)
    expect(world.log).toEqual([])
  })

  it('a file that cannot be read any more, with words', async () => {
    const { outside } = makeOutside(1000)
    const upload = new FileUpload(bigFile(1000), { ...outside, fingerprint: () => Promise.reject(new DOMException('gone', 'NotReadableError')) }, { files: new Slots(1), parts: new Slots(1) }, () => {})
    await upload.run()
    expect(upload.progress).toMatchObject({ state: 'failed' })
    expect(upload.progress.message).toContain('cannot be read any more')
  })
})

it('files wait in line for each other, and one that waits can be paused', async () => {
  const { outside, world } = makeOutside(2 * PART)
  const slots = { files: new Slots(1), parts: new Slots(4) }
  let release = () => {}
  const held = new Promise<void>(resolve => release = resolve)
  world.beforePut = () => held
  const [one, two, three] = [1, 2, 3].map(n => new FileUpload(bigFile(2 * PART, `${n}.mp4`), outside, slots, () => {})) as [FileUpload, FileUpload, FileUpload]
  const runs = [one.run(), two.run(), three.run()]
  await new Promise(resolve => setTimeout(resolve))
  expect([one, two, three].map(upload => upload.progress.state)).toEqual(['sending', 'waiting', 'waiting'])
  two.pause()
  release()
  await Promise.all(runs)
  expect([one, two, three].map(upload => upload.progress.state)).toEqual(['done', 'paused', 'done'])
})
