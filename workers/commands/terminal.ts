/** Writes one line to stderr and ends: 2 for wrong arguments, 1 for files that hold no such thing. */
export function fail(code: 1 | 2, message: string): never {
  process.stderr.write(`${message.replace(/\s*\n\s*/g, ' ')}\n`)
  process.exit(code)
}

/** Waits until all is written: exiting earlier would cut a pipe short. */
export function print(text: string): Promise<void> {
  return new Promise((resolve, reject) => process.stdout.write(`${text}\n`, error => error ? reject(error) : resolve()))
}
