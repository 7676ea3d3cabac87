import { describe, expect, it } from 'vitest'
import { piecesOf } from '#shared/utils/transcript/pieces'

const marked = (text: string, looked: string, evidence: string[] = []) => piecesOf(text, looked, evidence).map(piece => piece.kind === 'plain' ? piece.text : `[${piece.kind[0]}:${piece.text}]`).join('')

describe('the words of a caption', () => {
  it('are marked where they decided a chapter, whatever case and marks stand between', () => {
    expect(marked('So, Where are we? The gussets.', '', ['where are we', 'gussets'])).toBe('So, [e:Where are we]? The [e:gussets].')
  })
  it('mark whole words only', () => {
    expect(marked('gluey glue', '', ['glue'])).toBe('gluey [e:glue]')
  })
  it('show what is looked for before what decided, and lose no letter', () => {
    expect(marked('glue the glue', 'glue', ['glue'])).toBe('[f:glue] the [f:glue]')
    expect(marked('', 'x', ['y'])).toBe('')
    expect(marked('a.b (c', '.b (', ['*'])).toBe('a[f:.b (]c')
  })
})
