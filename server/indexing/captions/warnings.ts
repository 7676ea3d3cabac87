/** How many warnings a reading lists before it only counts them: a broken file can have one for every line. */
export const MAX_CAPTION_WARNINGS = 50

/** Collects what people should know about a file, and counts the rest once the list is long enough. */
export class WarningList {
  private readonly listed: string[] = []
  private uncounted = 0

  /** Takes a function, so that the words are made only for warnings that are listed. */
  add(message: () => string): void {
    if (this.listed.length < MAX_CAPTION_WARNINGS) this.listed.push(message())
    else this.uncounted++
  }

  toArray(): string[] {
    return this.uncounted > 0 ? [...this.listed, `and ${this.uncounted} more`] : [...this.listed]
  }
}

/** Shortens a piece of somebody's file for use inside a message; control characters become spaces. */
export function excerpt(text: string, length = 40): string {
  // Cut before cleaning: a line may be megabytes long.
  const clean = text.slice(0, length * 4).replace(/[\p{Cc}\s]+/gu, ' ').trim()
  const characters = [...clean]
  return characters.length > length ? `${characters.slice(0, length - 1).join('')}…` : clean
}
