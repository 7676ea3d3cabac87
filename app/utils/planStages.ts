interface Staged { stage: string }

/** True where a new stage begins in the order shown. */
export function startsStage(steps: readonly Staged[], index: number): boolean {
  return index === 0 || steps[index]!.stage !== steps[index - 1]!.stage
}

/** The stages in the order in which they first come. */
export function stagesOf(steps: readonly Staged[]): string[] {
  return [...new Set(steps.map(step => step.stage).filter(Boolean))]
}

/**
 * The stage that a step takes on when it has been moved to `index`: that of the step before it (or after it
 * at the head) when neither neighbour is of its own stage. Undefined when it keeps its own.
 */
export function stageAfterMove(steps: readonly Staged[], index: number): string | undefined {
  const [before, moved, after] = [steps[index - 1], steps[index]!, steps[index + 1]]
  const neighbours = [before, after].filter(step => step !== undefined)
  if (!neighbours.length || neighbours.some(step => step.stage === moved.stage)) return undefined
  return neighbours[0]!.stage
}
