import { buildSite, checkNode, installDebianPackages } from '../../workers/prepare.mjs'
import { type Figure, print, within } from './figures'

/**
 * `npm run measure [-- footage search ribband upload click]`: every promised figure as a ratio or against its budget,
 * in one run. Not a test: figures wander on a busy machine, and a miss is a finding to look into.
 */
const PARTS: Record<string, () => Promise<Figure[]>> = {
  footage: async () => (await (await import('./indexFootage')).measureIndexFootage())
    .map(({ keyframeEveryFrames, ratio, budget, method }) => ({ name: `index-footage, keyframe every ${keyframeEveryFrames} frames (${method}), against a bare decode (CPU)`, value: ratio, unit: '×', budget })),
  search: async () => searchFigures(await (await import('./search')).measureSearch()),
  ribband: async () => (await import('./ribband')).measureRibband(),
  upload: async () => (await import('./upload')).measureUpload(await (await import('./indexFootage')).makeLongClip(30)),
  click: async () => (await import('./clickToFrame')).measureClickToFrame(),
}

function searchFigures({ databaseP95, http, ilikeP95 }: Awaited<ReturnType<typeof import('./search')['measureSearch']>>): Figure[] {
  if (typeof http === 'string') throw new Error(http)
  return [
    { name: 'search over 1,000,000 captions in the database, p95', value: databaseP95, unit: 'ms', budget: 50 },
    { name: 'the same over HTTP, p95', value: http.p95, unit: 'ms', budget: 100 },
    { name: 'the same against ILIKE on the same table, p95', value: databaseP95 / ilikeP95, unit: '×', budget: 1 },
  ]
}

checkNode()
installDebianPackages(['postgresql', 'ffmpeg', 'chromium'])
buildSite()
const asked = process.argv.slice(2)
const unknown = asked.filter(name => !PARTS[name])
if (unknown.length) {
  console.error(`There is no part called ${unknown.join(', ')}: choose ${Object.keys(PARTS).join(', ')}.`)
  process.exit(2)
}
const figures: Figure[] = []
for (const [name, measure] of Object.entries(PARTS)) {
  if (asked.length && !asked.includes(name)) continue
  console.log(`── ${name}`)
  const got = await measure()
  print(got)
  figures.push(...got)
}
console.log(`\n${figures.filter(within).length} of ${figures.length} figures within their budgets`)
print(figures.filter(figure => !within(figure)))
process.exit(0)
