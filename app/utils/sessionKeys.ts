/** Every key of the session page, in one table: it binds them and it is the list that `?` opens. */

export const SESSION_ACTIONS = [
  'toggle', 'back', 'pause', 'on', 'second-back', 'second-on', 'frame-back', 'frame-on', 'camera',
  'in', 'out', 'go-in', 'go-out', 'clear', 'tag',
  'chapter-before', 'chapter-after', 'pencilled-before', 'pencilled-after', 'other-step', 'other-operation', 'retag', 'split', 'join', 'ink', 'start-here', 'end-here', 'note', 'delete', 'undo', 'redo',
  'find', 'follow', 'keys',
] as const
export type SessionAction = typeof SESSION_ACTIONS[number]

export interface SessionKey {
  action: SessionAction
  group: 'Playing' | 'In and out' | 'Chapters' | 'This page'
  does: string
  /** For people. */
  keys: string
  /** `event.key`, lower case; `code` where Alt or another layout may change the letter. */
  match: { key: string[], code?: string, /** By place on the keyboard: Shift and a digit is another character on every layout. */ codes?: string[], shift?: boolean, command?: boolean, alt?: boolean }
}

export const SESSION_KEYS: readonly SessionKey[] = [
  { action: 'toggle', group: 'Playing', does: 'Play or pause', keys: 'Space', match: { key: [' '] } },
  { action: 'back', group: 'Playing', does: 'Run back; again for faster', keys: 'J', match: { key: ['j'] } },
  { action: 'pause', group: 'Playing', does: 'Pause', keys: 'K', match: { key: ['k'] } },
  { action: 'on', group: 'Playing', does: 'Run on; again for faster', keys: 'L', match: { key: ['l'] } },
  { action: 'second-back', group: 'Playing', does: 'A second back', keys: '←', match: { key: ['arrowleft'] } },
  { action: 'second-on', group: 'Playing', does: 'A second on', keys: '→', match: { key: ['arrowright'] } },
  { action: 'frame-back', group: 'Playing', does: 'A frame back', keys: ', or Shift ←', match: { key: [','] } },
  { action: 'frame-back', group: 'Playing', does: '', keys: '', match: { key: ['arrowleft'], shift: true } },
  { action: 'frame-on', group: 'Playing', does: 'A frame on', keys: '. or Shift →', match: { key: ['.'] } },
  { action: 'frame-on', group: 'Playing', does: '', keys: '', match: { key: ['arrowright'], shift: true } },
  { action: 'camera', group: 'Playing', does: 'The other camera', keys: 'C', match: { key: ['c'] } },
  { action: 'in', group: 'In and out', does: 'In point here; with Alt exactly here', keys: 'I', match: { key: ['i'], code: 'KeyI', alt: true } },
  { action: 'out', group: 'In and out', does: 'Out point here; with Alt exactly here', keys: 'O', match: { key: ['o'], code: 'KeyO', alt: true } },
  { action: 'go-in', group: 'In and out', does: 'Go to the in point', keys: 'Shift I', match: { key: ['i'], shift: true } },
  { action: 'go-out', group: 'In and out', does: 'Go to the out point', keys: 'Shift O', match: { key: ['o'], shift: true } },
  { action: 'clear', group: 'In and out', does: 'Clear in and out, or let go of the chapter', keys: 'X or Esc', match: { key: ['x', 'escape'] } },
  { action: 'tag', group: 'In and out', does: 'Tag what is marked; else ink the pencilled chapter and go on to the next, or retag the inked one', keys: 'Enter', match: { key: ['enter'] } },
  { action: 'chapter-before', group: 'Chapters', does: 'The chapter before', keys: '↑', match: { key: ['arrowup'] } },
  { action: 'chapter-after', group: 'Chapters', does: 'The chapter after', keys: '↓', match: { key: ['arrowdown'] } },
  { action: 'pencilled-before', group: 'Chapters', does: 'The pencilled chapter before', keys: 'Shift ↑', match: { key: ['arrowup'], shift: true } },
  { action: 'pencilled-after', group: 'Chapters', does: 'The pencilled chapter after', keys: 'Shift ↓', match: { key: ['arrowdown'], shift: true } },
  { action: 'other-step', group: 'Chapters', does: 'Make it the next likeliest step, the second or the third', keys: '1 2 3', match: { key: [], codes: ['Digit1', 'Digit2', 'Digit3'] } },
  { action: 'other-operation', group: 'Chapters', does: 'Make it the next likeliest operation, the second or the third', keys: 'Shift 1 2 3', match: { key: [], codes: ['Digit1', 'Digit2', 'Digit3'], shift: true } },
  { action: 'retag', group: 'Chapters', does: 'Choose its step and operation', keys: 'R', match: { key: ['r'] } },
  { action: 'split', group: 'Chapters', does: 'Split at the playhead', keys: 'S', match: { key: ['s'] } },
  { action: 'join', group: 'Chapters', does: 'Join with the next', keys: 'M', match: { key: ['m'] } },
  { action: 'ink', group: 'Chapters', does: 'Ink a pencilled chapter', keys: 'N', match: { key: ['n'] } },
  { action: 'start-here', group: 'Chapters', does: 'Begin it at the playhead', keys: '[', match: { key: ['['] } },
  { action: 'end-here', group: 'Chapters', does: 'End it at the playhead', keys: ']', match: { key: [']'] } },
  { action: 'note', group: 'Chapters', does: 'Write a note', keys: 'W', match: { key: ['w'] } },
  { action: 'delete', group: 'Chapters', does: 'Delete it', keys: 'Delete', match: { key: ['delete', 'backspace'] } },
  { action: 'undo', group: 'Chapters', does: 'Undo', keys: 'Ctrl or ⌘ Z', match: { key: ['z'], command: true } },
  { action: 'redo', group: 'Chapters', does: 'Redo', keys: 'Ctrl or ⌘ Shift Z', match: { key: ['z'], command: true, shift: true } },
  { action: 'redo', group: 'Chapters', does: '', keys: '', match: { key: ['y'], command: true } },
  { action: 'find', group: 'This page', does: 'Find words in the transcript; there Enter goes to the next place, with Shift to the one before', keys: '/', match: { key: ['/'] } },
  { action: 'follow', group: 'This page', does: 'Let the transcript follow the playback', keys: 'F', match: { key: ['f'] } },
  { action: 'keys', group: 'This page', does: 'This list', keys: '?', match: { key: ['?'] } },
]

type Pressed = Pick<KeyboardEvent, 'key' | 'code' | 'shiftKey' | 'altKey' | 'ctrlKey' | 'metaKey'>

/** Marks that need Shift on some keyboards and not on others. */
const ANY_SHIFT = new Set(['?', '/', '[', ']', ',', '.'])

/** The action of a key, or null. Pure, so that the table can be tested whole. */
export function sessionActionOf(event: Pressed): SessionAction | null {
  const key = event.key.toLowerCase()
  const command = event.ctrlKey || event.metaKey
  const found = SESSION_KEYS.find(({ match }) => {
    if (Boolean(match.command) !== command) return false
    if (event.altKey) return match.alt === true && event.code === match.code && !event.shiftKey
    if (match.codes) return match.codes.includes(event.code) && Boolean(match.shift) === event.shiftKey
    if (!match.key.includes(key)) return false
    return ANY_SHIFT.has(key) || Boolean(match.shift) === event.shiftKey
  })
  return found?.action ?? null
}

/** Which of several a digit names, from 0. */
export const digitOf = (event: Pick<KeyboardEvent, 'code'>): number => Number(event.code.slice(-1)) - 1

/** The key of an action as people read it, for buttons. */
export function keyWords(action: SessionAction): string {
  return SESSION_KEYS.find(one => one.action === action)!.keys
}
