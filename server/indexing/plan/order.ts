/**
 * Where new rows go among the ones already there: each after the row that stands before it in the table.
 * New rows at the head of the table go before the first row that the list has already, or to the end.
 * Rows that are there keep their order.
 * @param standing ids in order
 * @param table the table's rows in order; `isNew` ones are not in `standing`
 */
export function placeNewRows(standing: string[], table: { id: string, isNew: boolean }[]): string[] {
  const order = [...standing]
  const firstKnown = table.find(row => !row.isNew)
  let before: string | undefined
  for (const row of table) {
    if (row.isNew) {
      const at = before !== undefined ? order.indexOf(before) + 1 : firstKnown ? order.indexOf(firstKnown.id) : order.length
      order.splice(at, 0, row.id)
    }
    before = row.id
  }
  return order
}

/**
 * The whole order after the rows in use were put in the order `wanted`; each archived row stays behind
 * the row in use that it stood behind, so that it comes back in its place.
 * Undefined when `wanted` is not exactly the rows in use: somebody else added or archived one.
 */
export function reorder(standing: { id: string, archived: boolean }[], wanted: string[]): string[] | undefined {
  const inUse = new Set(standing.filter(row => !row.archived).map(row => row.id))
  if (wanted.length !== inUse.size || new Set(wanted).size !== wanted.length || !wanted.every(id => inUse.has(id))) return undefined
  const behind = new Map<string, string[]>()
  let anchor = ''
  for (const { id, archived } of standing) {
    if (archived) behind.set(anchor, [...behind.get(anchor) ?? [], id])
    else anchor = id
  }
  return [...behind.get('') ?? [], ...wanted.flatMap(id => [id, ...behind.get(id) ?? []])]
}
