import { expect, it } from 'vitest'
import { ownPath } from '../../../../app/utils/ownPath'

it.each([
  ['/builds/1/plan?x=1#y', '/builds/1/plan?x=1#y'],
  ['/watch/../builds', '/builds'],
  ['/search?q=%2F%2Felsewhere.example', '/search?q=%2F%2Felsewhere.example'],
])('%s stays', (to, path) => {
  expect(ownPath(to)).toBe(path)
})

it.each([
  undefined, null, 7, ['/builds'], '', 'builds', 'https://elsewhere.example', '//elsewhere.example', '/\\elsewhere.example', '/\t/elsewhere.example',
  '/.//elsewhere.example', '/x/..//elsewhere.example', 'javascript:alert(1)', '/sign-in', '/sign-in?to=/builds', '/sign-up',
])('%j leads to the builds', (to) => {
  expect(ownPath(to)).toBe('/builds')
})
