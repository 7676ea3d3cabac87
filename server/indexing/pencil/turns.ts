import { isStopWord } from '../words/tokenise'
import type { Speech } from './speech'

/** What speaks for or against a new chapter at the start of a cue. */
export const TURN_FEATURES = ['always', 'okay', 'so', 'next', 'while', 'here', 'gap', 'pause', 'longSilence', 'sound', 'sentence', 'midSentence', 'dangling', 'newWords', 'because', 'scene'] as const
const K = TURN_FEATURES.length
const F = Object.fromEntries(TURN_FEATURES.map((name, i) => [name, i])) as Record<typeof TURN_FEATURES[number], number>

const OKAY = /^(?:(?:um|uh|well|and|yeah|ooh|oh) )?(?:okay|ok|right|all right|alright|good|lovely|there we go|there you go|there)\b/
const SO = /^(?:(?:um|uh|okay|ok|right|all right|alright|and|well) )?(?:so|now)\b/
const NEXT = /^(?:(?:um|uh|okay|ok|right|all right|alright|and|so|now|well) )*(?:next|last|first|over to|on to|onto|back (?:to|at|on)|moving on|other side|the other|let's|time (?:to|for)|then|that's (?:the|it|that)|final|another)\b/
const WHILE = /^(?:(?:um|uh|okay|ok|right|all right|alright|and|so|now|well) )*(?:while|meanwhile|in the mean ?time|since|before|after|later|hang on|sorry|anyway|where was i)\b/
const HERE = /^(?:(?:um|uh|okay|ok|right|all right|alright|and|so|now|well) )*(?:here's|here is|here are|this is|these are|we're|i've got|i'm going to|we've got|what i|what we)\b/
const BECAUSE = /^(?:because|which|and (?:it|that|they|you|then)|but|that|who|or|if|it|they|until|to|of|in|on|at|with|for|from|than|you|he|she)\b/
const DANGLING = new Set('a an the of to in on at with for from by into onto and or but so if that which who this these those my your his her its our their is are was were be been am i i\'m i\'ve i\'ll you you\'re he she it it\'s we they they\'re not no just very really about like than as because when where what how there\'s going gonna got get let want can could would should will do does did have has had some any every each another little big'.split(' '))
/** Cues on each side that are held against each other. */
const SIDE = 7

/** Cue × feature. The first cue of a clip has none: a chapter starts there anyway. */
export function hearTurns(speech: Speech): Float32Array {
  const out = new Float32Array(speech.cues.length * K)
  speech.cues.forEach((cue, i) => {
    if (cue.first) return
    const before = speech.cues[i - 1]!
    const text = cue.text.toLowerCase().replace(/[,.!?;:]/g, '').trim()
    const at = i * K
    out[at + F.always] = 1
    if (OKAY.test(text)) out[at + F.okay] = 1
    if (SO.test(text)) out[at + F.so] = 1
    if (NEXT.test(text)) out[at + F.next] = 1
    if (WHILE.test(text)) out[at + F.while] = 1
    if (HERE.test(text)) out[at + F.here] = 1
    if (BECAUSE.test(text)) out[at + F.because] = 1
    const seconds = cue.gapMs / 1000
    out[at + F.gap] = Math.min(4, Math.log1p(seconds)) / 2
    if (seconds > 4) out[at + F.pause] = 1
    if (seconds > 14) out[at + F.longSilence] = 1
    if (cue.sound) out[at + F.sound] = 1
    if (cue.scene) out[at + F.scene] = 1
    const ends = /[.!?]["'”’]?$/.test(before.text.trim())
    if (speech.punctuated) out[at + (ends ? F.sentence : F.midSentence)] = 1
    const last = before.text.toLowerCase().trim().split(/\s+/).at(-1)!.replace(/[.,!?;:]+$/, '')
    if (!ends && seconds < 1.5 && DANGLING.has(last)) out[at + F.dangling] = 1
    out[at + F.newWords] = newWords(speech, i)
  })
  return out
}

/** 0 to 1: how little of what is said after a cue's start was said before it. */
function newWords(speech: Speech, i: number): number {
  const bag = (from: number, to: number) => {
    const stems = new Set<string>()
    for (let cue = Math.max(0, from); cue < Math.min(speech.cues.length, to); cue++) {
      for (let at = speech.cues[cue]!.from; at < speech.cues[cue]!.to; at++) if (!isStopWord(speech.words[at]!.word)) stems.add(speech.stems[at]!)
    }
    return stems
  }
  const left = bag(i - SIDE, i)
  const right = bag(i, i + SIDE)
  if (!left.size || !right.size) return 0.8
  let both = 0
  for (const stem of right) if (left.has(stem)) both++
  return 1 - both / Math.sqrt(left.size * right.size)
}
