import { TOPICS } from '../lexicon/topics'
import { PhraseBook } from './phrases'

/** The words of all topics (numbered as in `TOPICS`), found in a row of stems. */
export const TOPIC_BOOK = new PhraseBook(TOPICS.flatMap((topic, i) => topic.words.map(({ phrase, weight }) => [phrase, { topic: i, weight }] as const)))
