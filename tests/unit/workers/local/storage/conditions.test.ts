import { describe, expect, it } from 'vitest'
import { assertMayWrite, mayRead, rangeStillValid } from '../../../../../workers/local/storage/conditions'

const current = { etag: 'abc', lastModified: new Date('2026-05-06T07:08:09.500Z') }
const before = 'Wed, 06 May 2026 07:08:08 GMT'
const same = 'Wed, 06 May 2026 07:08:09 GMT'

/** Source of the expected answers: RFC 9110 section 13. */
describe('conditions on reading', () => {
  it.each([
    [{}, true],
    [{ 'if-match': '"abc"' }, true],
    [{ 'if-match': '"x", "abc"' }, true],
    [{ 'if-match': '*' }, true],
    [{ 'if-match': '"x"' }, 'PreconditionFailed'],
    [{ 'if-match': '"abc"', 'if-unmodified-since': before }, true],
    [{ 'if-none-match': '"abc"' }, false],
    [{ 'if-none-match': 'W/"abc"' }, false],
    [{ 'if-none-match': '"x"' }, true],
    [{ 'if-none-match': '"x"', 'if-modified-since': same }, true],
    [{ 'if-modified-since': same }, false],
    [{ 'if-modified-since': before }, true],
    [{ 'if-modified-since': 'yesterday' }, true],
    [{ 'if-unmodified-since': same }, true],
    [{ 'if-unmodified-since': before }, 'PreconditionFailed'],
  ])('%o', (headers: Record<string, string>, expected) => {
    if (typeof expected === 'boolean') expect(mayRead(headers, current)).toBe(expected)
    else expect(() => mayRead(headers, current)).toThrow(expect.objectContaining({ code: expected }))
  })
})

describe('conditions on writing', () => {
  it('can ask that nothing stands there', () => {
    expect(() => assertMayWrite({ 'if-none-match': '*' }, current)).toThrow(expect.objectContaining({ status: 412 }))
    expect(() => assertMayWrite({ 'if-none-match': '*' }, null)).not.toThrow()
  })

  it('can ask that a known object stands there', () => {
    expect(() => assertMayWrite({ 'if-match': '"abc"' }, current)).not.toThrow()
    expect(() => assertMayWrite({ 'if-match': '"x"' }, current)).toThrow(expect.objectContaining({ status: 412 }))
    expect(() => assertMayWrite({ 'if-match': '"abc"' }, null)).toThrow(expect.objectContaining({ status: 412 }))
  })
})

describe('If-Range', () => {
  it('holds for the same object only', () => {
    expect(rangeStillValid(undefined, current)).toBe(true)
    expect(rangeStillValid('"abc"', current)).toBe(true)
    expect(rangeStillValid('"x"', current)).toBe(false)
    expect(rangeStillValid('W/"abc"', current)).toBe(false)
    expect(rangeStillValid(same, current)).toBe(true)
    expect(rangeStillValid(before, current)).toBe(false)
  })
})
