/** Asks again until the answer is neither undefined, null nor false; the test's own time limit ends it. */
export async function until<Answer>(ask: () => Promise<Answer> | Answer, everyMs = 25): Promise<NonNullable<Answer>> {
  for (;;) {
    const answer = await ask()
    if (answer !== undefined && answer !== null && answer !== false) return answer
    await new Promise(resolve => setTimeout(resolve, everyMs))
  }
}
