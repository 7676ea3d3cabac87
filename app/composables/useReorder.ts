import { dragAndDrop } from '@formkit/drag-and-drop/vue'

interface ReorderOptions<Row> {
  items: Ref<Row[]>
  /** What a row is called when it is spoken of: "Step 3, Fit the skeg". */
  name: (row: Row) => string
  /** Keeps the new order; throws when it cannot. */
  save: (rows: Row[], moved: Row) => Promise<unknown>
}

/**
 * A list put in order by dragging a grip (mouse, pen, finger) or by keys on it: space picks up and puts down,
 * arrows move, Escape leaves it where it was. `spoken` goes into an aria-live region.
 * Rows are elements with `data-row`, grips have `data-grip`.
 */
export function useReorder<Row extends { id: string }>({ items, name, save }: ReorderOptions<Row>) {
  const list = ref<HTMLElement>()
  const rows = shallowRef<Row[]>([...items.value])
  const held = ref<string | null>(null)
  const spoken = ref('')
  watch(items, (next) => {
    if (!held.value) rows.value = [...next]
  })

  onMounted(() => dragAndDrop({
    parent: list as Ref<HTMLElement>,
    values: rows,
    dragHandle: '[data-grip]',
    draggable: element => element.hasAttribute('data-row'),
    // The grip takes the focus when it is pressed, which would otherwise call the drag off.
    handleNodeFocus: () => {},
    handleNodeBlur: () => {},
    dragPlaceholderClass: 'opacity-40',
    synthDragPlaceholderClass: 'opacity-40',
    onDragend: ({ draggedNode }) => void keep(draggedNode.data.value as Row),
  }))
  // The library marks rows as selected, which means nothing on a list item or table row.
  if (import.meta.client) {
    useEventListener(document, ['pointerup', 'pointercancel'], () => setTimeout(() => {
      for (const row of list.value?.querySelectorAll('[aria-selected]') ?? []) row.removeAttribute('aria-selected')
    }))
  }

  const orderOf = (of: Row[]) => of.map(row => row.id).join()
  let saving = false
  async function keep(moved: Row) {
    if (saving || orderOf(rows.value) === orderOf(items.value)) return
    saving = true
    try {
      await save(rows.value, moved)
    }
    finally {
      saving = false
      rows.value = [...items.value]
    }
  }

  const placeOf = (id: string) => rows.value.findIndex(row => row.id === id)
  const where = (id: string) => `place ${placeOf(id) + 1} of ${rows.value.length}`
  const rowOf = (id: string) => rows.value[placeOf(id)]!

  function pickUp(id: string) {
    held.value = id
    spoken.value = `${name(rowOf(id))}, picked up at ${where(id)}. Arrow keys move it, space puts it down, Escape leaves it where it was.`
  }
  async function putDown() {
    const id = held.value
    if (!id) return
    held.value = null
    spoken.value = `${name(rowOf(id))}, put down at ${where(id)}.`
    await keep(rowOf(id))
  }
  function leave() {
    const id = held.value
    if (!id) return
    held.value = null
    rows.value = [...items.value]
    spoken.value = `${name(rowOf(id))}, back at ${where(id)}.`
  }
  let moving = false
  async function move(id: string, to: number, grip: HTMLElement) {
    const next = [...rows.value]
    const [row] = next.splice(placeOf(id), 1)
    next.splice(Math.max(0, Math.min(to, next.length)), 0, row!)
    moving = true
    rows.value = next
    await nextTick()
    // The row's element may have been taken out and put back, which loses the focus.
    grip.focus()
    grip.scrollIntoView({ block: 'nearest' })
    moving = false
    spoken.value = `${where(id)}.`
  }

  function onGripKey(event: KeyboardEvent, id: string) {
    const grip = event.currentTarget as HTMLElement
    const steps: Record<string, number> = { ArrowUp: placeOf(id) - 1, ArrowDown: placeOf(id) + 1, Home: 0, End: rows.value.length }
    if (event.key === ' ' || event.key === 'Enter') void (held.value === id ? putDown() : pickUp(id))
    else if (held.value === id && event.key === 'Escape') leave()
    else if (held.value === id && event.key in steps) void move(id, steps[event.key]!, grip)
    else return
    event.preventDefault()
  }
  function onGripBlur() {
    if (!moving) void putDown()
  }
  return { list, rows, held, spoken, onGripKey, onGripBlur }
}
