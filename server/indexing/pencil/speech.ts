import { isStopWord, tokenise } from '../words/tokenise'
import { evenCues } from './evenCues'
import type { SpokenClip } from './types'

/** A word as heard: where and when. */
export interface HeardWord { word: string, stem: string, cue: number, atMs: number, stop: boolean, /** 0 to 1: how far it is about the work in hand, rather than other times. */ present: number }

export interface HeardCue {
  clip: number
  startMs: number
  endMs: number
  text: string
  /** Index of its first word and of the one after its last. */
  from: number
  to: number
  /** Silence before it, ms; before a clip's first cue, from the start of the clip. */
  gapMs: number
  /** True when a cue of sounds ("[Music]") stands in that silence. */
  sound: boolean
  /** True for the first cue of a clip. */
  first: boolean
  /** True when the picture changes about where it starts. */
  scene: boolean
}

export interface Speech { cues: HeardCue[], words: HeardWord[], stems: string[], /** True when captions carry full stops. */ punctuated: boolean }

const SOUND = /[[(♪][^\])♪]*[\])♪]/g

/** Turns that speak of other days: what was done, or will be. */
const OTHER_TIMES = /\b(?:last (?:time|week|month|night|year|saturday|sunday|monday|tuesday|wednesday|thursday|friday|episode|video)|next (?:time|week|month|year|step|weekend|episode|video|saturday|sunday)|yesterday|the other (?:day|night|week)|a while (?:back|ago)|(?:days?|weeks?|months?) ago|later(?: on)?|eventually|tomorrow|some ?day|you (?:saw|watched|remember)|remember (?:i|when)|i'?ll be|we'?ll be|will be|going to (?:be|have|need)|off camera|already|(?:when|once|before|until|till|after) (?:it|they|she|the|that|this|we|i)|down the road|weeks away|in (?:march|april|may|june|july|august|september|october|november|december|january|february|spring|summer|autumn|the winter)|after that|and then (?:that|it|we))\b/g

/**
 * Joins what is said over the clips of a session into one row of words. Sounds in brackets are silence.
 * Words of a cue are given times by their place in it.
 */
export function listen(clips: readonly SpokenClip[]): Speech {
  const speech: Speech = { cues: [], words: [], stems: [], punctuated: false }
  let stops = 0
  clips.forEach((clip, clipAt) => {
    let silentFrom = 0
    let sound = false
    let first = true
    for (const cue of evenCues(clip.cues)) {
      const text = cue.text.replace(SOUND, ' ').replace(/<[^>]*>/g, ' ').replace(/\s+/g, ' ').trim()
      const tokens = tokenise(text)
      if (!tokens.length) {
        sound ||= cue.text.trim() !== ''
        continue
      }
      if (/[.!?]/.test(text)) stops++
      const from = speech.words.length
      const at = speech.cues.length
      const length = Math.max(1, text.length)
      const away = otherTimes(text)
      for (const token of tokens) {
        speech.words.push({
          word: token.word, stem: token.stem, cue: at, stop: isStopWord(token.word),
          atMs: Math.round(cue.startMs + (cue.endMs - cue.startMs) * token.start / length),
          present: away ? 0 : 1,
        })
        speech.stems.push(token.stem)
      }
      speech.cues.push({ clip: clipAt, startMs: cue.startMs, endMs: cue.endMs, text, from, to: speech.words.length, gapMs: Math.max(0, cue.startMs - silentFrom), sound, first, scene: !first && changes(clip.sceneChangesMs, silentFrom, cue.startMs) })
      silentFrom = Math.max(silentFrom, cue.endMs)
      sound = false
      first = false
    }
  })
  speech.punctuated = stops > speech.cues.length / 20
  return speech
}

/** How far from the silence before a cue a change of picture still goes with it, ms. */
const NEAR_MS = 1200

function changes(scenes: readonly number[] | undefined, fromMs: number, toMs: number): boolean {
  return scenes?.some(ms => ms >= fromMs - NEAR_MS && ms <= toMs + NEAR_MS) ?? false
}

function otherTimes(text: string): boolean {
  OTHER_TIMES.lastIndex = 0
  return OTHER_TIMES.test(text.toLowerCase())
}
