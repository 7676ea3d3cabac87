import { describe, expect, it } from 'vitest'
import { combineHashes, fingerprintOf, sha256Of } from '../../../../app/utils/upload/hashing'
import { readInterrupted, writeInterrupted } from '../../../../app/utils/upload/interrupted'
import { sortPicked } from '../../../../app/utils/upload/picking'
import { Speedometer, timeLeftWords } from '../../../../app/utils/upload/speed'
import { combineHashes as combineOnServer } from '#server/services/contentHash'
import { fingerprintOf as fingerprintInTests, sha256 } from '../../../support/uploading'

const bytes = Buffer.from(Array.from({ length: 3_000_000 }, (_, i) => i * 7 % 251))

describe('checksums', () => {
  it('agree with Node’s, and page and site combine them alike', async () => {
    expect(await sha256Of(new Blob([bytes]))).toBe(sha256(bytes))
    const hashes = [sha256(Buffer.from('a')), sha256(Buffer.from('b'))]
    expect(await combineHashes(hashes)).toBe(combineOnServer(hashes))
  })

  it('come out the same without crypto.subtle, as on a plain http address', async () => {
    const subtle = Object.getOwnPropertyDescriptor(globalThis.crypto, 'subtle') ?? Object.getOwnPropertyDescriptor(Object.getPrototypeOf(globalThis.crypto), 'subtle')!
    Object.defineProperty(globalThis.crypto, 'subtle', { value: undefined, configurable: true })
    try {
      expect(await sha256Of(new Blob([bytes]))).toBe(sha256(bytes))
    }
    finally {
      Object.defineProperty(globalThis.crypto, 'subtle', subtle)
    }
  })
})

describe('the fingerprint of a file', () => {
  it('is a function of its bytes, not of its name or date', async () => {
    const one = await fingerprintOf(new File([bytes], 'a.mp4', { lastModified: 1 }))
    expect(one).toBe(await fingerprintOf(new File([bytes], 'b.mov', { lastModified: 2 })))
    expect(one).toBe(fingerprintInTests(bytes))
  })

  it('changes with the first byte, the last byte and the size', async () => {
    const one = await fingerprintOf(new Blob([bytes]))
    for (const at of [0, bytes.length - 1]) {
      const changed = Buffer.from(bytes)
      changed[at] = changed[at]! ^ 1
      expect(await fingerprintOf(new Blob([changed]))).not.toBe(one)
    }
    expect(await fingerprintOf(new Blob([bytes, 'x']))).not.toBe(one)
  })
})

describe('speed and time left', () => {
  it('says nothing before a second, then follows the last seconds', () => {
    const speed = new Speedometer()
    speed.mark(0, 0)
    speed.mark(500, 500)
    expect(speed.bytesPerSecond).toBeNull()
    for (let s = 1; s <= 60; s++) speed.mark(s * 1000, s * 1000)
    expect(speed.bytesPerSecond).toBe(1000)
    for (let s = 61; s <= 90; s++) speed.mark(60_000 + (s - 60) * 4000, s * 1000)
    expect(speed.bytesPerSecond).toBe(4000)
    expect(speed.secondsLeft(8000)).toBe(2)
  })

  it('is never below zero when a part is lost', () => {
    const speed = new Speedometer()
    speed.mark(9000, 0)
    speed.mark(1000, 2000)
    expect(speed.bytesPerSecond).toBeNull()
  })

  it.each([[null, ''], [4, 'a few seconds left'], [44, 'about 50 s left'], [200, 'about 3 min left'], [3600 * 2 + 1900, 'about 2 h 30 min left'], [3600 * 2 - 100, 'about 2 h left']])('%s s: %s', (seconds, words) => {
    expect(timeLeftWords(seconds)).toBe(words)
  })
})

it('sorts what is picked by name and type', () => {
  const named = (name: string, type = '') => new File(['x'], name, { type })
  const picked = sortPicked([named('a.MP4'), named('a.en.vtt'), named('b.SRT'), named('odd', 'video/quicktime'), named('notes.txt', 'text/plain'), named('.DS_Store'), named('c.mts')])
  expect(picked.clips.map(file => file.name)).toEqual(['a.MP4', 'odd', 'c.mts'])
  expect(picked.captions.map(file => file.name)).toEqual(['a.en.vtt', 'b.SRT'])
  expect(picked.others.map(file => file.name)).toEqual(['notes.txt'])
})

describe('what is remembered over a reload', () => {
  const memory = new Map<string, string>()
  const storage = { getItem: (key: string) => memory.get(key) ?? null, setItem: (key: string, value: string) => void memory.set(key, value), removeItem: (key: string) => void memory.delete(key) }
  it('comes back as it was, and an empty list leaves nothing', () => {
    const list = [{ name: 'a.mp4', sizeBytes: 5, sessionId: 's', buildId: 'b' }]
    writeInterrupted(storage, list)
    expect(readInterrupted(storage)).toEqual(list)
    writeInterrupted(storage, [])
    expect(memory.size).toBe(0)
  })
  it.each(['', 'nonsense', '{}', '[1,null,{"name":3}]'])('%j counts as nothing', (text) => {
    expect(readInterrupted({ getItem: () => text })).toEqual([])
  })
  it('a browser that refuses to remember does not stop an upload', () => {
    expect(() => writeInterrupted({ setItem: () => { throw new Error('full') }, removeItem: () => {} }, [{ name: 'a', sizeBytes: 1, sessionId: 's', buildId: 'b' }])).not.toThrow()
  })
})
