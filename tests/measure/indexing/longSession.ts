import type { PencilInput } from '#server/indexing/pencil/pencil'
import type { LabelledSession } from './load'

/** Labelled sessions end to end as the clips of one day, and their plans as one plan, to so many hours and steps. */
export function longSession(sessions: LabelledSession[], hours: number, most: number): PencilInput {
  const clips: PencilInput['clips'] = []
  let ms = 0
  for (let at = 0; ms < hours * 3_600_000; at++) {
    const session = sessions[at % sessions.length]!
    clips.push({ cues: session.cues, durationMs: session.truth.durationMs })
    ms += session.truth.durationMs
  }
  const builds = [...new Map(sessions.map(session => [session.build, session])).values()]
  const steps = builds.flatMap(session => session.steps)
  return {
    clips,
    steps: Array.from({ length: most }, (_, i) => ({ ...steps[i % steps.length]!, number: i + 1 })),
    parts: [...new Map(builds.flatMap(session => session.parts).map(part => [part.name.toLowerCase(), part])).values()],
  }
}
