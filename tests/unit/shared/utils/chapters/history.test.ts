import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { ChapterView } from '#shared/types/session'
import { apply, type Edit, ink, join, mark, moveEdge, remove, retag, split } from '#shared/utils/chapters/edits'
import { asChanges, type Done, doneWith, merge, onTopOf, type Outcome, restamp, takeBack, touchedBy } from '#shared/utils/chapters/history'

const CLIP_MS = 60_000
let serial = 0
const newId = () => `new-${++serial}`
const chapter = (id: string, startMs: number, endMs: number, more: Partial<ChapterView> = {}): ChapterView => ({
  id, clipId: 'clip', startMs, endMs, stepId: 'step', operation: 'glue', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null, ...more,
})

/** Takes edits as the server does: versions must match, and each write raises them. */
function createServer(start: ChapterView[]) {
  let rows = start
  return {
    rows: () => rows,
    take(edit: Edit): Outcome {
      const changes = asChanges(edit)
      const now = new Map(rows.map(one => [one.id, one]))
      for (const one of changes.remove) {
        if (now.get(one.id)?.version !== one.version) throw new Error(`stale removal of ${one.id}`)
        now.delete(one.id)
      }
      const chapters = changes.put.map((put): ChapterView => {
        if ((now.get(put.id)?.version ?? null) !== put.version) throw new Error(`stale put of ${put.id}: ${put.version} on ${now.get(put.id)?.version}`)
        const { overProposal: _, ...kept } = put
        const view = { ...kept, version: (put.version ?? 0) + 1, inkedBy: null, updatedBy: 'me' }
        now.set(put.id, view)
        return view
      })
      const outcome = { chapters, removed: changes.remove.map(one => one.id) }
      rows = merge(rows, outcome)
      return outcome
    },
  }
}
type Server = ReturnType<typeof createServer>

function doEdit(server: Server, edit: Edit): Done {
  const before = touchedBy(edit, server.rows())
  return doneWith(edit, before, server.take(edit))
}
const content = (chapters: ChapterView[]) => chapters.map(({ version: _v, updatedBy: _u, ...rest }) => rest).sort((a, b) => a.startMs - b.startMs)

function someEdit(chapters: ChapterView[], kind: number, a: number, b: number): Edit | null {
  const one = chapters[a % Math.max(1, chapters.length)]
  const [low, high] = [Math.min(a, b), Math.max(a, b)]
  if (kind === 0 || !one) return high - low >= 200 ? mark(chapters, 'clip', low, high, { stepId: null, operation: 'paint', partIds: ['p'] }, newId) : null
  if (kind === 1) return retag(one, { operation: 'cut', note: String(b) })
  if (kind === 2) return split(one, b, newId)
  if (kind === 3) return join(chapters, one)
  if (kind === 4) return remove(one)
  if (kind === 5) return moveEdge(chapters, one, b % 2 ? 'start' : 'end', a, CLIP_MS)
  return ink([one])
}
const edits = fc.array(fc.tuple(fc.nat(6), fc.nat(CLIP_MS), fc.nat(CLIP_MS)), { maxLength: 12 })

describe('undo', () => {
  it('takes any run of edits back to the beginning and redo brings them again', () => {
    fc.assert(fc.property(edits, (run) => {
      const start = [chapter('a', 0, 20_000), chapter('b', 20_000, 30_000, { inking: 'pencilled', confidence: 0.4 }), chapter('c', 40_000, 55_000)]
      const server = createServer(start)
      let undoable: Done[] = []
      let redoable: Done[] = []
      for (const [kind, a, b] of run) {
        const edit = someEdit(server.rows(), kind, a, b)
        if (edit) undoable.push(doEdit(server, edit))
      }
      const end = content(server.rows())
      for (let round = 0; round < 2; round++) {
        while (undoable.length) {
          const done = undoable.pop()!
          const result = doEdit(server, takeBack(done, server.rows())!)
          undoable = restamp(undoable, done, result)
          redoable.push(result)
        }
        expect(content(server.rows())).toEqual(content(start))
        while (redoable.length) {
          const done = redoable.pop()!
          const result = doEdit(server, takeBack(done, server.rows())!)
          redoable = restamp(redoable, done, result)
          undoable.push(result)
        }
        expect(content(server.rows())).toEqual(end)
      }
    }))
  })

  it('is refused when somebody else has changed the chapter since', () => {
    const server = createServer([chapter('a', 0, 20_000)])
    const done = doEdit(server, retag(server.rows()[0]!, { operation: 'cut' }))
    server.take(retag(server.rows()[0]!, { operation: 'paint' }))
    expect(takeBack(done, server.rows())).toBeNull()
  })

  it('goes on past an edit of one’s own that was undone', () => {
    const server = createServer([chapter('a', 0, 20_000)])
    const first = doEdit(server, retag(server.rows()[0]!, { operation: 'cut' }))
    const second = doEdit(server, retag(server.rows()[0]!, { operation: 'paint' }))
    const result = doEdit(server, takeBack(second, server.rows())!)
    expect(takeBack(first, server.rows())).toBeNull()
    const [again] = restamp([first], second, result)
    doEdit(server, takeBack(again!, server.rows())!)
    expect(server.rows()[0]!.operation).toBe('glue')
  })
})

describe('an edit on top of one that is still on its way', () => {
  it('names the version that the first one gets', () => {
    const server = createServer([chapter('a', 0, 20_000, { version: 7 })])
    const first = split(server.rows()[0]!, 5000, newId)!
    const drawn = apply(server.rows(), first)
    const second = retag(drawn[1]!, { operation: 'cut' })
    const third = remove(drawn[0]!)
    const outcome = server.take(first)
    server.take(onTopOf(second, first, outcome))
    server.take(onTopOf(third, first, outcome))
    expect(server.rows().map(one => [one.startMs, one.operation])).toEqual([[5000, 'cut']])
  })

  it('keeps a version that somebody else had already overtaken', () => {
    const first = retag(chapter('a', 0, 1000, { version: 3 }), { operation: 'cut' })
    const stale = retag(chapter('a', 0, 1000, { version: 2 }), { operation: 'paint' })
    expect(onTopOf(stale, first, { chapters: [chapter('a', 0, 1000, { version: 4 })], removed: [] }).put[0]!.version).toBe(2)
  })
})
