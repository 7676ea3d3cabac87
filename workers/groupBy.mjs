// eslint-flat-config-utils calls Object.groupBy, which Node 20 has not got. For the lint command only.
Object.groupBy ??= (items, keyOf) => {
  const groups = Object.create(null)
  let index = 0
  for (const item of items) (groups[keyOf(item, index++)] ??= []).push(item)
  return groups
}
