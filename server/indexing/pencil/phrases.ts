import { tokenise } from '../words/tokenise'

/** Phrases of a lexicon, found in a row of stems; grammar words within a phrase count. */
export class PhraseBook<Meaning> {
  private readonly byFirst = new Map<string, { stems: string[], meaning: Meaning }[]>()

  constructor(phrases: Iterable<readonly [phrase: string, meaning: Meaning]>) {
    for (const [phrase, meaning] of phrases) {
      const stems = tokenise(phrase).map(token => token.stem)
      if (!stems.length) continue
      const known = this.byFirst.get(stems[0]!)
      if (known) known.push({ stems, meaning })
      else this.byFirst.set(stems[0]!, [{ stems, meaning }])
    }
  }

  /** Calls `found` for every phrase that stands in the row, with the place of its first word and its length. */
  find(stems: readonly string[], found: (meaning: Meaning, at: number, length: number) => void): void {
    for (let at = 0; at < stems.length; at++) {
      for (const phrase of this.byFirst.get(stems[at]!) ?? []) {
        if (phrase.stems.every((stem, i) => stems[at + i] === stem)) found(phrase.meaning, at, phrase.stems.length)
      }
    }
  }
}
