import { describe, expect, it } from 'vitest'
import { hearSpeaker } from '#server/indexing/facts/speaker'

describe('which measures a speaker uses', () => {
  it('counts what is said', () => {
    expect(hearSpeaker('six inches and a foot, 2 mm at most').inches).toBe(true)
    expect(hearSpeaker('six mil ply, 40 millimetres, an inch').inches).toBe(false)
    expect(hearSpeaker('3/8 there, 5⁄16 here').inches).toBe(true)
    expect(hearSpeaker('4″ and 5 "').inches).toBe(true)
  })
  it('falls back on what the build is drawn in, else on inches', () => {
    expect(hearSpeaker('hold this', 'mm').inches).toBe(false)
    expect(hearSpeaker('hold this', 'inch').inches).toBe(true)
    expect(hearSpeaker('hold this').inches).toBe(true)
  })
  it('takes a named scale over habits', () => {
    expect(hearSpeaker('12 inches at 20 celsius')).toEqual({ inches: true, fahrenheit: false })
    expect(hearSpeaker('12 mm at 70 Fahrenheit')).toEqual({ inches: false, fahrenheit: true })
  })
  it('expects °F of people who use inches, but not when they talk British', () => {
    expect(hearSpeaker('six inches')).toEqual({ inches: true, fahrenheit: true })
    expect(hearSpeaker('six inches, lovely, mate, cheers, a proper shed')).toEqual({ inches: true, fahrenheit: false })
    expect(hearSpeaker('six mil')).toEqual({ inches: false, fahrenheit: false })
  })
})
