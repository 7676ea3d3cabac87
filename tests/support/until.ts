/** Asks again until the answer is neither undefined, null nor false; the test's own time limit ends it. */
export async function until<Answer>(ask: () => Promise<Answer> | Answer, everyMs = 25): Promise<Exclude<NonNullable<Answer>, false>> {
  for (;;) {
    const answer = await ask()
    if (answer !== undefined && answer !== null && answer !== false) return answer as Exclude<NonNullable<Answer>, false>
    await new Promise(resolve => setTimeout(resolve, everyMs))
  }
}
