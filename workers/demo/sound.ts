import { RATE, type Samples } from './speech'
import type { TimedClip } from './times'
import type { ToolSound } from './types'

/** A row of numbers that looks random and is the same every time. */
export function noise(seed: number): () => number {
  let state = seed >>> 0 || 1
  return () => {
    state ^= state << 13
    state >>>= 0
    state ^= state >>> 17
    state ^= state << 5
    state >>>= 0
    return state / 2_147_483_648 - 1
  }
}

/** The voices, the tools and the quiet of the room, for a clip with its own microphone. */
export function mixClip({ timeline, voices }: TimedClip): Samples {
  const mixed = roomTone(timeline.durationMs)
  timeline.lines.forEach((line, i) => place(mixed, voices[i]!, line.startMs, 0.85))
  timeline.sounds.forEach((span, i) => {
    place(mixed, tool(span.sound, span.endMs - span.startMs, i + 7), span.startMs, span.under ? 0.16 : 1)
  })
  return limited(mixed)
}

/** The same sound from further off: quieter, duller, with the walls in it. */
export function fromFurtherOff(heard: Samples, fromMs: number, lengthMs: number): Samples {
  const out = roomTone(lengthMs)
  const first = at(fromMs)
  const echo = at(38)
  let dull = 0
  for (let i = 0; i < out.length; i++) {
    const direct = heard[first + i] ?? 0
    const walls = heard[first + i - echo] ?? 0
    dull += 0.34 * (direct * 0.75 + walls * 0.3 - dull)
    out[i] = out[i]! + dull
  }
  return limited(out)
}

const at = (ms: number) => Math.round(ms / 1000 * RATE)

function roomTone(ms: number): Samples {
  const random = noise(41)
  const out = new Float32Array(at(ms))
  let low = 0
  for (let i = 0; i < out.length; i++) {
    low += 0.03 * (random() - low)
    out[i] = low * 0.012 + random() * 0.0006
  }
  return out
}

function place(into: Samples, sound: Samples, startMs: number, gain: number): void {
  const first = at(startMs)
  for (let i = 0; i < sound.length && first + i < into.length; i++) into[first + i]! += sound[i]! * gain
}

function limited(samples: Samples): Samples {
  return samples.map(value => Math.tanh(value * 1.15) * 0.9)
}

/** What a tool sounds like for so long. */
function tool(kind: ToolSound, ms: number, seed: number): Samples {
  const random = noise(seed * 7919)
  const out = new Float32Array(at(ms))
  let low = 0
  let lower = 0
  for (let i = 0; i < out.length; i++) {
    const t = i / RATE
    const white = random()
    low += 0.3 * (white - low)
    lower += 0.08 * (low - lower)
    out[i] = voiceOf(kind, t, { white, low, lower }) * edges(t, ms / 1000)
  }
  return out
}

interface Hiss { white: number, low: number, lower: number }

function voiceOf(kind: ToolSound, t: number, { white, low, lower }: Hiss): number {
  const turn = (hz: number) => Math.sin(t * hz * 2 * Math.PI)
  const beat = (every: number, length: number) => Math.max(0, 1 - (t % every) / length)
  const stroke = (every: number) => Math.max(0, Math.sin(t / every * Math.PI * 2)) ** 0.7
  switch (kind) {
    case 'saw': return (low * 0.45 * (0.6 + 0.4 * Math.sign(turn(46))) + turn(92) * 0.07 + turn(184) * 0.05) * (0.8 + 0.2 * turn(0.7))
    case 'drill': return (low * 0.12 + turn(210) * 0.06 + turn(421) * 0.05 + turn(97) * 0.05) * (t % 1.5 < 1.05 ? 1 : 0.02)
    case 'plane': return (low - lower) * 0.5 * stroke(1.5)
    case 'brush': return (white - low) * 0.1 * stroke(0.85)
    case 'pencil': return (white - low) * 0.07 * (stroke(0.7) > 0.3 ? 0.6 + 0.4 * turn(31) : 0)
    case 'stir': return (low * 0.1 + lower * 0.3) * (0.4 + 0.6 * stroke(0.65))
    case 'hammer': return (low * 0.9 + turn(240) * 0.3) * beat(0.62, 0.06) ** 2
    case 'knock': return (lower * 1.4 + turn(150) * 0.22) * beat(1.1, 0.09) ** 2
    case 'kettle': return low * 0.16 * (0.7 + 0.3 * turn(3.1)) + turn(1240) * 0.006
  }
}

function edges(t: number, length: number): number {
  return Math.min(1, t / 0.06, Math.max(0, (length - t) / 0.1))
}

/** The samples as a WAV file. */
export function wavFile(samples: Samples): Buffer {
  const head = Buffer.alloc(44)
  head.write('RIFF', 0)
  head.writeUInt32LE(36 + samples.length * 2, 4)
  head.write('WAVEfmt ', 8)
  head.writeUInt32LE(16, 16)
  head.writeUInt16LE(1, 20)
  head.writeUInt16LE(1, 22)
  head.writeUInt32LE(RATE, 24)
  head.writeUInt32LE(RATE * 2, 28)
  head.writeUInt16LE(2, 32)
  head.writeUInt16LE(16, 34)
  head.write('data', 36)
  head.writeUInt32LE(samples.length * 2, 40)
  const body = Buffer.alloc(samples.length * 2)
  samples.forEach((value, i) => body.writeInt16LE(Math.round(Math.max(-1, Math.min(1, value)) * 32_767), i * 2))
  return Buffer.concat([head, body])
}
