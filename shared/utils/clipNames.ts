/**
 * When a clip was recorded, from its file name. Phones, cameras and recorders write local time and
 * say no zone; so does the answer. Any date followed by a time counts, whatever stands around it:
 * `VID_20260314_101530.mp4`, `PXL_20260314_101530123.mp4`, `2026-03-14 10.15.30.mov`.
 * @returns 'YYYY-MM-DDTHH:MM:SS' (with '.mmm' where written), or null
 */
export function recordedAtFromName(name: string): string | null {
  const stem = name.slice(0, 500).replace(/\.[A-Za-z0-9]{1,5}$/, '')
  for (const pattern of [RUN_TOGETHER, SPELT_OUT]) {
    for (const match of stem.matchAll(pattern)) {
      const local = localTime(match.groups as Record<string, string | undefined>)
      if (local) return local
    }
  }
  return null
}

const RUN_TOGETHER = /(?<!\d)(?<y>\d{4})(?<mo>\d\d)(?<d>\d\d)[-_T .]?(?<h>\d\d)(?<mi>\d\d)(?<s>\d\d)(?<ms>\d{3})?(?!\d)/g
const SPELT_OUT = /(?<!\d)(?<y>\d{4})[-_.](?<mo>\d\d)[-_.](?<d>\d\d)(?:[-_T ]{1,3}| at )(?<h>\d\d)[-_.:h]?(?<mi>\d\d)[-_.:m]?(?<s>\d\d)(?:[.,_](?<ms>\d{3}))?(?!\d)/g

function localTime(parts: Record<string, string | undefined>): string | null {
  const [y, mo, d, h, mi, s] = ['y', 'mo', 'd', 'h', 'mi', 's'].map(key => Number(parts[key])) as [number, number, number, number, number, number]
  if (y < 1990 || y > 2099 || h > 23 || mi > 59 || s > 59) return null
  // Through a calendar, so that 31 June is refused.
  const day = new Date(Date.UTC(y, mo - 1, d))
  if (day.getUTCMonth() !== mo - 1 || day.getUTCDate() !== d) return null
  return `${parts.y}-${parts.mo}-${parts.d}T${parts.h}:${parts.mi}:${parts.s}${parts.ms ? `.${parts.ms}` : ''}`
}

const collator = new Intl.Collator('en', { numeric: true, sensitivity: 'base' })

/** Compares file names as people count: `clip 2.mp4` before `clip 10.mp4`; capitals and accents decide last. */
export function compareFileNames(a: string, b: string): number {
  return collator.compare(a, b) || (a < b ? -1 : a > b ? 1 : 0)
}
