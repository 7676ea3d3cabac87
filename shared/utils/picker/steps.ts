import Fuse from 'fuse.js'
import type { PartView, StepView } from '#shared/types/plan'

export interface PickerStep { step: StepView, parts: PartView[], /** Why it stands this high. */ because: 'today' | 'recent' | '' }

/** What puts a step before others when nothing is typed. */
export interface Nearness { /** Ticked for this session. */ today: readonly string[], /** Picked lately, last first. */ recent: readonly string[] }

/**
 * Finds steps as they are typed: by number, title, stage, parts and their aliases, with slips of the hand forgiven.
 * With nothing typed, or among equals, today's steps come first, then those picked lately, then the order of the plan.
 */
export function createStepFinder(steps: readonly StepView[], parts: readonly PartView[], { today, recent }: Nearness) {
  const partOf = new Map(parts.map(part => [part.id, part]))
  const rank = (step: StepView) => {
    const lately = recent.indexOf(step.id)
    if (today.includes(step.id)) return lately < 0 ? 0.5 : lately / (recent.length + 1) / 2
    return lately < 0 ? 3 : 1 + lately / (recent.length + 1)
  }
  const all = steps.filter(step => !step.archived).map((step): PickerStep => ({
    step,
    parts: step.partIds.flatMap(id => partOf.get(id) ?? []),
    because: today.includes(step.id) ? 'today' : recent.includes(step.id) ? 'recent' : '',
  })).sort((a, b) => rank(a.step) - rank(b.step) || a.step.position - b.step.position)
  const place = new Map(all.map((one, index) => [one.step.id, index]))

  const fuse = new Fuse(all, {
    includeScore: true, ignoreLocation: true, threshold: 0.34, minMatchCharLength: 1,
    keys: [
      { name: 'title', getFn: one => one.step.title, weight: 3 },
      { name: 'parts', getFn: one => one.parts.map(part => part.name), weight: 2 },
      { name: 'aliases', getFn: one => one.parts.flatMap(part => part.aliases), weight: 1.5 },
      { name: 'stage', getFn: one => one.step.stage, weight: 1 },
    ],
  })

  return {
    all,
    find(typed: string): PickerStep[] {
      const words = typed.trim()
      if (!words) return all
      if (/^\d+$/.test(words)) {
        const exact = all.filter(one => String(one.step.number) === words)
        return [...exact, ...all.filter(one => String(one.step.number).startsWith(words) && !exact.includes(one)).sort((a, b) => a.step.number - b.step.number)]
      }
      // Of steps that fit about as well, the nearer one: a fuzzy score is no finer than a tenth.
      return fuse.search(words)
        .sort((a, b) => Math.round((a.score ?? 0) * 10) - Math.round((b.score ?? 0) * 10) || place.get(a.item.step.id)! - place.get(b.item.step.id)!)
        .map(found => found.item)
    },
  }
}
