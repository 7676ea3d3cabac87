import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hearFacts } from '#server/indexing/facts/hearFacts'
import { FACT_KINDS } from '#server/indexing/facts/types'
import { heard, INCHES, METRIC, spoken } from './support'

describe('lengths', () => {
  it.each([
    ['1 1⁄2 inches wide', 38.1], ['1 1/2 inches wide', 38.1], ['1½ inches wide', 38.1], ['1½" wide', 38.1], ['1-1/2 inches', 38.1],
    ['one and a half inches', 38.1], ['an inch and a half', 38.1], ['inch and a half', 38.1], ['one inch and a half', 38.1],
    ['inch and five eighths', 41.3], ['three quarters of an inch', 19.1], ['a quarter inch gap', 6.4], ['half an inch proud', 12.7],
    ['a sixteenth of an inch', 1.6], ['three thirty-seconds', 2.4], ['three thirty seconds of an inch', 2.4], ['a sixty-fourth of an inch', 0.4], ['5/32 off', 4],
    ['.5 inches', 12.7], ['0.5 inches', 12.7], ['2.5 inches', 63.5], ['two point five inches', 63.5], ['thirty-six inches', 914.4],
    ['six feet', 1828.8], ['8 ft', 2438.4], ['three foot six', 1066.8], ['three foot six inches', 1066.8], ['3\'6"', 1066.8], ['3′6″', 1066.8], ['12\' 6"', 3810],
    ['five feet 4 inches', 1625.6], ['five feet four and a half inches', 1638.3], ['12 feet, 6 inches', 3810], ['12 feet and 6 inches', 3810],
    ['12 and a half feet', 3810], ['twelve and a half feet', 3810], ['12 1/2 feet', 3810], ['a foot and a half long', 457.2], ['two feet and a half', 762],
    ['two yards of cloth', 1828.8], ['ten thou', 0.25], ['five thousandths of an inch', 0.13],
  ])('%s: %s mm', (text, mm) => expect(heard(text)).toEqual([`length ${mm} mm`]))

  it.each([
    ['6 mil', 6], ['6mm', 6], ['six millimetre', 6], ['a six millimeter gap', 6], ['six and a half mil', 6.5], ['half a mil', 0.5], ['a mil and a half', 1.5], ['millimetre and a half', 1.5],
    ['10 cm', 100], ['ten centimetres', 100], ['2.4 metres', 2400], ['2.4m', 2400], ['a metre and a half', 1500], ['two metres and a half', 2500],
    ['two metre fifteen', 2150], ['two metres fifteen', 2150], ['four meters sixty', 4600], ['1,200 mm', 1200],
    ['a hundred and fifty mil', 150], ['hundred and fifty mil', 150], ['two fifty mil', 250], ['eighteen twenty mil', 1820], ['two thousand four hundred mil', 2400],
  ])('%s: %s mm', (text, mm) => expect(heard(text, METRIC)).toEqual([`length ${mm} mm`]))

  it('does not take a number of fastenings for hundreds', () => {
    expect(heard('two fifty mil screws', METRIC)).toEqual(['fastener 50 mm'])
  })

  it('reads pairs, each in the unit of both', () => {
    expect(heard('30 by 18 millimetres', METRIC)).toEqual(['length 30 mm', 'length 18 mm'])
    expect(heard('30 mil by 18 mil', METRIC)).toEqual(['length 30 mm', 'length 18 mm'])
    expect(heard('thirty by eighteen', METRIC)).toEqual(['length 30 mm', 'length 18 mm'])
    expect(heard('3/4 by 1 1/2')).toEqual(['length 19.1 mm', 'length 38.1 mm'])
    expect(heard('4 inch by 8 foot')).toEqual(['length 101.6 mm', 'length 2438.4 mm'])
  })

  it('hears lengths without a unit where the words around say what they are', () => {
    expect(heard('an eighth off that')).toEqual(['length 3.2 mm'])
    expect(heard('one and three quarters')).toEqual(['length 44.5 mm'])
    expect(heard('three and a half wide')).toEqual(['length 88.9 mm'])
    expect(heard('150 apart', METRIC)).toEqual(['length 150 mm'])
    expect(heard('at 2240 and 2243', METRIC)).toEqual(['length 2240 mm', 'length 2243 mm'])
    for (const text of ['a quarter turn', 'half way', 'a third of the way', 'three quarters done', 'three and a half']) expect(heard(text), text).toEqual([])
  })
})

describe('thickness', () => {
  it.each([['three eighths thick', 9.5], ['quarter-inch ply', 6.4], ['half inch plywood', 12.7], ['one and a half inch stock', 38.1]])('%s: %s mm', (text, mm) => expect(heard(text)).toEqual([`thickness ${mm} mm`]))
  it.each([['6 mil ply', 6], ['6 mm thick', 6], ['six millimetre ply', 6]])('%s: %s mm', (text, mm) => expect(heard(text, METRIC)).toEqual([`thickness ${mm} mm`]))
  it('is not the size of a sheet', () => {
    expect(heard('an eight foot sheet')).toEqual(['length 2438.4 mm'])
  })
  it.each([['18 gauge copper wire', 1], ['14 gauge wire', 1.6], ['12 AWG', 2.1], ['16-gauge', 1.3]])('of wire: %s is %s mm', (text, mm) => expect(heard(text)).toEqual([`thickness ${mm} mm`]))
})

describe('angles, slopes and mixes', () => {
  it.each([['a fourteen degree bevel', 14], ['tilt the saw to 22.5°', 22.5], ['12 and a half degrees', 12.5], ['a 45-degree cut', 45]])('%s', (text, value) => expect(heard(text)).toEqual([`angle ${value} deg`]))
  it('is no angle beyond 180', () => expect(heard('turn it 270 degrees')).toEqual([]))
  it.each([
    ['an 8 to 1 scarf', 8], ['eight to one', 8], ['8:1', 8], ['one in twelve', 12], ['1 in 12', 12],
    ['2 to 1', 2], ['five parts to one', 5], ['5 parts resin to 1 part hardener', 5], ['one part hardener to five parts resin', 5], ['one to one', 1],
    ['fifty fifty', 1], ['fifty-fifty', 1], ['a 50/50 mix', 1], ['50-50', 1],
  ])('%s', (text, value) => expect(heard(text)).toEqual([`ratio ${value} ratio`]))
})

describe('counts', () => {
  it.each([
    ['31 holes', 31], ['five layers', 5], ['two coats', 2], ['six up each side', 6], ['seven along the bottom', 7], ['90 of them', 90],
    ['a dozen clamps', 12], ['half a dozen clamps', 6], ['two dozen screws', 24], ['a hundred and ten copper rivets', 110], ['twenty-five screws', 25],
  ])('%s', (text, value) => expect(heard(text)).toEqual([`count ${value} count`]))
  it('does not count ones and twos of a thing', () => {
    for (const text of ['two screws', 'one of them', 'a clamp']) expect(heard(text), text).toEqual([])
  })
})

describe('fastenings', () => {
  it.each([['number 8 screws', 8], ['number eight bronze screws', 8], ['no. 8 screws', 8], ['#6 screws', 6], ['number eights', 8], ['8 gauge screws', 8], ['the screws are #10', 10]])('%s: gauge %s', (text, value) => expect(heard(text)).toEqual([`fastener ${value} count`]))
  it.each([['1 1/4 inch screws', 31.8], ['inch and a quarter screws', 31.8], ['three quarter inch brads', 19.1], ['25 mil screws', 25]])('%s: %s mm long', (text, mm) => expect(heard(text)).toEqual([`fastener ${mm} mm`]))
  it('hears gauge and length of one screw', () => {
    expect(heard('#8 by 1 inch screws')).toEqual(['fastener 8 count', 'fastener 25.4 mm'])
    expect(heard('number 8 by 40 mil screws', METRIC)).toEqual(['fastener 8 count', 'fastener 40 mm'])
  })
})

describe('times', () => {
  it.each([
    ['wait an hour and a half', 90], ['half an hour', 30], ['two and a half hours', 150], ['forty-five minutes', 45], ['forty five minutes', 45], ['24 hours', 1440],
    ['three quarters of an hour', 45], ['quarter of an hour', 15], ['give it an hour', 60], ['30 seconds', 0.5], ['five-minute epoxy', 5], ['it cures in 3 days', 4320],
  ])('%s: %s min', (text, value) => expect(heard(text)).toEqual([`time ${value} min`]))
  it('leaves times that measure nothing', () => {
    for (const text of ['wait a minute', 'give me a second', 'two hours ago', 'in two days', 'an hour or two', 'an hour to the inch', 'ten, fifteen minutes']) expect(heard(text), text).toEqual([])
  })
})

describe('temperatures', () => {
  it.each([
    ['68 degrees in here', 20], ['it is 62 degrees in the shed', 16.7], ['150 degrees fahrenheit', 65.6], ['70°F', 21.1], ['21°C', 21], ['20 degrees celsius', 20],
    ['it was 28 degrees outside', -2.2], ['about 15 degrees in here today', 15], ['ten degrees below freezing', -5.6], ['minus 5 degrees outside', -5],
  ])('in °F country: %s is %s °C', (text, value) => expect(heard(text)).toEqual([`temperature ${value} C`]))
  it.each([
    ['18 degrees in here', 18], ['ten degrees below freezing', -10], ['minus 5 degrees outside', -5], ['95 degrees in the steam box', 95], ['warmed up to sixty degrees', 60],
    ['80 degrees in here', 26.7], ['70 degrees fahrenheit', 21.1],
  ])('in °C country: %s is %s °C', (text, value) => expect(heard(text, METRIC)).toEqual([`temperature ${value} C`]))
  it('is an angle where a saw or a bevel is spoken of', () => {
    expect(heard('set the bevel to 20 degrees')).toEqual(['angle 20 deg'])
    expect(heard('the cut is 60 degrees and the blade is hot', METRIC)).toEqual(['angle 60 deg'])
  })
})

describe('what is left alone', () => {
  it.each([
    'a couple of inches', 'a few inches', 'several feet', 'six or seven strokes', 'three to four inches', '5-6 inches', 'between two and three inches', 'an inch or two', 'an inch or so', 'two or three coats',
    '80 grit', '120-grit paper', 'one hundred and twenty grit', '3 o\'clock', '3:30', 'at 1:15', '10:15 in the morning', 'half past three', 'six thirty',
    'frame two', 'bulkhead 3', 'station number 4', 'step 12', 'a number two pencil', '$25', '£40', '50 percent', '5 litres', '300 gsm', 'a 2 by 4', '4x8 sheet', 'in 1998', 'two part epoxy', 'a foot',
  ])('%s', text => expect(heard(text)).toEqual([]))
  it.each(['a mil or two', '8 to 10 mil', 'a mil', 'two kilos'])('%s', text => expect(heard(text, METRIC)).toEqual([]))
})

describe('over the edges of cues', () => {
  it('has the time of the cue in which the first word stands, and the words across both', () => {
    expect(hearFacts(spoken('then it is an inch', 'and a half', 'all along'), { speaker: INCHES })).toEqual([{ atMs: 0, kind: 'length', text: 'an inch and a half', value: 38.1, unit: 'mm' }])
    expect(hearFacts(spoken('take off three', 'eighths of an inch'), { speaker: INCHES })).toMatchObject([{ atMs: 0, value: 9.5 }])
    expect(hearFacts(spoken('wait', 'forty', 'five', 'minutes'), { speaker: INCHES })).toMatchObject([{ atMs: 4000, text: 'forty five minutes', value: 45 }])
    expect(hearFacts(spoken('so five', 'parts', 'to one'), { speaker: INCHES })).toMatchObject([{ atMs: 0, value: 5, unit: 'ratio' }])
  })
  it('reads over line breaks and tags as over spaces', () => {
    expect(heard('take three\neighths <i>of an</i>\ninch')).toEqual(['length 9.5 mm'])
  })
  it('passes empty cues by', () => {
    expect(hearFacts(spoken('', 'two', '', 'hours'), { speaker: INCHES })).toMatchObject([{ atMs: 4000, value: 120 }])
    expect(hearFacts(spoken())).toEqual([])
    expect(hearFacts(spoken('', '<b></b>'))).toEqual([])
  })
  it('hears the speaker itself when it is not told', () => {
    expect(hearFacts(spoken('six mil ply and nine mil ply', 'it is 15 degrees in here'))).toMatchObject([{ value: 6 }, { value: 9 }, { value: 15, unit: 'C' }])
    expect(hearFacts(spoken('it is 68 degrees in here'), { units: 'inch' })).toMatchObject([{ value: 20, unit: 'C' }])
  })
})

describe('whatever is said', () => {
  const word = fc.constantFrom('one', 'two', 'fifty', '3', '1/2', '½', 'and', 'a', 'an', 'half', 'inch', 'feet', 'mil', 'to', 'in', 'by', 'degrees', 'minutes', 'of', 'parts', '#', 'number', 'screws', '-', ':', ',', 'below', 'freezing', 'minus', 'between', 'gauge', 'dozen', 'point', 'metre', '"', '\'', '.5')
  it('answers known kinds, finite values, words of the clip and the start of a cue', () => {
    fc.assert(fc.property(fc.array(fc.array(word, { maxLength: 6 }), { maxLength: 6 }), fc.constantFrom(INCHES, METRIC), (cues, speaker) => {
      const clip = spoken(...cues.map(words => words.join(' ')))
      const all = clip.cues.map(cue => cue.text).filter(Boolean).join(' ').replace(/\s+/g, ' ')
      const facts = hearFacts(clip, { speaker })
      for (const { atMs, kind, text, value } of facts) {
        expect(FACT_KINDS).toContain(kind)
        expect(Number.isFinite(value)).toBe(true)
        expect(all).toContain(text)
        expect(clip.cues.some(cue => cue.startMs === atMs)).toBe(true)
      }
      expect(facts.map(fact => fact.atMs)).toEqual(facts.map(fact => fact.atMs).sort((a, b) => a - b))
    }))
  })
  it('makes no number of a point that no digit follows', () => {
    expect(heard('one point .5 metre')).toEqual(['length 500 mm'])
  })
})
