import { describe, expect, it } from 'vitest'
import { keyWords, SESSION_ACTIONS, SESSION_KEYS, sessionActionOf } from '../../../../app/utils/sessionKeys'

const press = (key: string, more: Partial<KeyboardEvent> = {}) => sessionActionOf({ key, code: '', shiftKey: false, altKey: false, ctrlKey: false, metaKey: false, ...more })

describe('the table of keys', () => {
  it('has a key, and words for it, for every action', () => {
    for (const action of SESSION_ACTIONS) expect(keyWords(action)).not.toBe('')
  })
  it('gives no key to two actions', () => {
    const taken = SESSION_KEYS.flatMap(({ match }) => match.key.map(key => [key, match.shift, match.command].join()))
    expect(new Set(taken).size).toBe(taken.length)
  })
  it.each([
    ['j', {}, 'back'], ['K', {}, 'pause'], [' ', {}, 'toggle'], ['ArrowLeft', {}, 'second-back'], ['ArrowLeft', { shiftKey: true }, 'frame-back'],
    ['I', { shiftKey: true }, 'go-in'], ['ˆ', { altKey: true, code: 'KeyI' }, 'in'], ['z', { ctrlKey: true }, 'undo'], ['Z', { metaKey: true, shiftKey: true }, 'redo'],
    ['?', { shiftKey: true }, 'keys'], ['Backspace', {}, 'delete'], ['Enter', {}, 'tag'],
    ['1', { code: 'Digit1' }, 'other-step'], ['&', { code: 'Digit1' }, 'other-step'], ['"', { code: 'Digit2', shiftKey: true }, 'other-operation'], ['ArrowDown', { shiftKey: true }, 'pencilled-after'], ['r', {}, 'retag'],
  ] as const)('reads %s %j as %s', (key, more, action) => {
    expect(press(key, more)).toBe(action)
  })
  it('leaves the browser’s own keys alone', () => {
    expect([press('l', { ctrlKey: true }), press('s', { metaKey: true }), press('ArrowLeft', { altKey: true }), press('j', { altKey: true, code: 'KeyJ' }), press('Tab'), press('S', { shiftKey: true })]).toEqual([null, null, null, null, null, null])
  })
})
