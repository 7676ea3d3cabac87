import { expect, it } from 'vitest'
import { isBroken, mayMend } from '#shared/utils/clipFailures'

it('only what lies outside the file may mend', () => {
  for (const code of ['timed-out', 'out-of-space', 'missing-object', 'internal'] as const) expect(mayMend({ code })).toBe(true)
  for (const code of ['empty-file', 'not-a-video', 'truncated', 'too-many-streams', 'picture-too-large', 'forbidden-format', 'no-duration', 'damaged'] as const) expect(mayMend({ code })).toBe(false)
})

it('a clip without a failure is not broken, one with a hopeless failure is', () => {
  expect(isBroken({ failure: null })).toBe(false)
  expect(isBroken({ failure: { code: 'internal' } })).toBe(false)
  expect(isBroken({ failure: { code: 'truncated' } })).toBe(true)
})
