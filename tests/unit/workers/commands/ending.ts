import { vi } from 'vitest'

/**
 * Runs what may end the process, and gives how it would have ended and what it had said by then; null when it went
 * on. The error thrown in place of the end may be caught by what runs: nothing that happens behind it counts.
 */
export async function ending(run: () => unknown): Promise<{ code: number, said: string } | null> {
  let said = ''
  let ended: { code: number, said: string } | null = null
  const write = vi.spyOn(process.stderr, 'write').mockImplementation((text) => {
    said += String(text)
    return true
  })
  const exit = vi.spyOn(process, 'exit').mockImplementation((code) => {
    ended ??= { code: Number(code), said }
    throw new Error('the process would have ended')
  })
  try {
    await run()
  }
  catch (error) {
    if (!ended) throw error
  }
  finally {
    write.mockRestore()
    exit.mockRestore()
  }
  return ended
}
