import { expect, it } from 'vitest'
import { formatDay, formatFootage } from '#shared/utils/days'

it.each([['2026-09-05', 'Sat 5 Sep 2026'], ['2028-02-29', 'Tue 29 Feb 2028'], ['2026-12-31', 'Thu 31 Dec 2026'], ['soon', 'soon']])('%s reads %s', (date, words) => {
  expect(formatDay(date)).toBe(words)
})
it.each([[0, '0 s'], [59_400, '59 s'], [60_000, '1 min'], [3_599_000, '1 h 00 min'], [11_100_000, '3 h 05 min']])('%i ms of footage reads %s', (ms, words) => {
  expect(formatFootage(ms)).toBe(words)
})
