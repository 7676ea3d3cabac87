import { randomUUID } from 'node:crypto'
import type pg from 'pg'
import { OPERATION_LEXICON } from '#server/indexing/lexicon/operations'
import { SYNONYM_SETS } from '#server/indexing/lexicon/synonyms'
import { cutPassages, type PassageChapter, type PassageCue } from '#server/indexing/search/cutPassages'
import { stemOf } from '#server/indexing/words/tokenise'
import { OPERATIONS, type Operation } from '#shared/types/trade'

/** A shop's worth of invented talk: words by Zipf's law, so that a few are in nearly every passage and most are rare. */
const CUES_A_CLIP = 180
const CUE_MS = 3_400
const WORDS_A_CUE = 9
const CHAPTERS_A_CLIP = 8
const TAIL_WORDS = 12_000
const PART_NAMES = ['bow transom', 'stern transom', 'chine log', 'side panel', 'bottom panel', 'gunwale', 'skeg', 'centre thwart', 'seat riser', 'quarter knee', 'mast step', 'rudder stock']
const GRAMMAR = 'the and to it a of in so that i on is you this we for just at with be here going like what get up now there one have all can out down they not them'.split(' ')

export interface CorpusBuild { id: string, ownerId: string, parts: { id: string, name: string }[], cues: number }
export interface Corpus { builds: CorpusBuild[], cues: number, passages: number, words: string[] }

/**
 * Fills a migrated, empty database with `cues` captions: one build holds two fifths of them, the rest is spread over
 * `builds - 1`. Same numbers, same corpus. Constraints of the caption rows are not checked while loading.
 */
export async function fillCorpus(pool: pg.Pool, { cues = 1_000_000, builds = 60 } = {}): Promise<Corpus> {
  const random = seeded(20260905)
  const words = vocabulary(random)
  const pick = zipf(words.length, random)
  const client = await pool.connect()
  const corpus: Corpus = { builds: [], cues: 0, passages: 0, words }
  try {
    await client.query('drop index passages_lexemes_index, search_words_trigram_index')
    const ownerId = (await client.query(`insert into users (email, name, password_hash) values ('corpus@example.test', 'Corpus', 'unusable') returning id`)).rows[0].id as string
    for (let b = 0; b < builds; b++) {
      const share = b === 0 ? cues * 0.4 : cues * 0.6 / (builds - 1)
      corpus.builds.push(await fillBuild(client, corpus, { number: b, ownerId, clips: Math.max(1, Math.round(share / CUES_A_CLIP)), random, sentence: () => Array.from({ length: WORDS_A_CUE }, () => random() < 0.45 ? GRAMMAR[Math.floor(random() * GRAMMAR.length)]! : words[pick()]!).join(' ') }))
    }
    await client.query('create index passages_lexemes_index on passages using gin (lexemes) with (fastupdate = true, gin_pending_list_limit = 256)')
    await client.query('create index search_words_trigram_index on search_words using gin (stem gin_trgm_ops)')
    await client.query('vacuum analyze')
  }
  finally {
    client.release()
  }
  return corpus
}

interface Filling { number: number, ownerId: string, clips: number, random: () => number, sentence: () => string }

async function fillBuild(client: pg.PoolClient, corpus: Corpus, { number, ownerId, clips, random, sentence }: Filling): Promise<CorpusBuild> {
  const build: CorpusBuild = { id: randomUUID(), ownerId, parts: PART_NAMES.map(name => ({ id: randomUUID(), name })), cues: 0 }
  await client.query(`insert into builds (id, address, name, visibility) values ($1, $2, $3, $4)`, [build.id, `corpus-${number}`, `Build ${number}`, number % 3 === 2 ? 'private' : 'public'])
  await client.query(`insert into memberships (build_id, user_id, role) values ($1, $2, 'builder')`, [build.id, ownerId])
  const steps = Array.from({ length: 30 }, (_, i) => ({ id: randomUUID(), number: i + 1, title: `${OPERATIONS[i % 14]} the ${PART_NAMES[i % PART_NAMES.length]}` }))
  await client.query(`insert into steps (id, build_id, number, position, title) select id, $1, n, n, title from unnest($2::uuid[], $3::int[], $4::text[]) s (id, n, title)`, [build.id, steps.map(s => s.id), steps.map(s => s.number), steps.map(s => s.title)])
  await client.query(`insert into parts (id, build_id, position, name) select id, $1, n, name from unnest($2::uuid[], $3::text[]) with ordinality p (id, name, n)`, [build.id, build.parts.map(p => p.id), build.parts.map(p => p.name)])
  for (let at = 0; at < clips; at += 60) await fillClips(client, corpus, build, steps, Math.min(60, clips - at), { random, sentence })
  return build
}

async function fillClips(client: pg.PoolClient, corpus: Corpus, build: CorpusBuild, steps: { id: string, title: string }[], count: number, { random, sentence }: Pick<Filling, 'random' | 'sentence'>): Promise<void> {
  const sessionId = (await client.query(`insert into sessions (build_id, date) values ($1, date '2024-01-01' + $2::int) returning id`, [build.id, Math.floor(random() * 900)])).rows[0].id as string
  const clipIds = Array.from({ length: count }, () => randomUUID())
  const trackIds = clipIds.map(() => randomUUID())
  const length = CUES_A_CLIP * CUE_MS
  await client.query(`insert into clips (id, session_id, build_id, name, object_key, size_bytes, state, duration_ms) select id, $1, $2, 'clip.mp4', id::text, 1, 'ready', $4 from unnest($3::uuid[]) id`, [sessionId, build.id, clipIds, length])
  await client.query(`insert into caption_tracks (id, session_id, build_id, clip_id, name, object_key, size_bytes, read) select t, $1, $2, c, 'clip.vtt', t::text, 1, true from unnest($3::uuid[], $4::uuid[]) x (t, c)`, [sessionId, build.id, trackIds, clipIds])
  const chapters = clipIds.flatMap(clipId => Array.from({ length: CHAPTERS_A_CLIP }, (_, i) => {
    const step = steps[Math.floor(random() * steps.length)]!
    const part = build.parts[Math.floor(random() * build.parts.length)]!
    return {
      clipId, id: randomUUID(), startMs: Math.floor(length / CHAPTERS_A_CLIP * i), endMs: Math.floor(length / CHAPTERS_A_CLIP * (i + 1)), stepId: step.id,
      operation: OPERATIONS[Math.floor(random() * 14)] as Operation, inking: random() < 0.7 ? 'inked' as const : 'pencilled' as const, partIds: [part.id], words: [step.title, part.name],
    }
  }))
  await client.query(`insert into chapters (id, clip_id, session_id, build_id, start_ms, end_ms, step_id, operation, inking) select id, c, $1, $2, f, t, s, o::operation, i::inking from unnest($3::uuid[], $4::uuid[], $5::int[], $6::int[], $7::uuid[], $8::text[], $9::text[]) x (id, c, f, t, s, o, i)`,
    [sessionId, build.id, ...(['id', 'clipId', 'startMs', 'endMs', 'stepId', 'operation', 'inking'] as const).map(key => chapters.map(chapter => chapter[key]))])
  await client.query(`insert into chapter_parts (chapter_id, part_id) select * from unnest($1::uuid[], $2::uuid[])`, [chapters.map(chapter => chapter.id), chapters.map(chapter => chapter.partIds[0])])
  await fillWords(client, corpus, build, { sessionId, clipIds, trackIds, chapters, sentence })
}

async function fillWords(client: pg.PoolClient, corpus: Corpus, build: CorpusBuild, { sessionId, clipIds, trackIds, chapters, sentence }: { sessionId: string, clipIds: string[], trackIds: string[], chapters: (PassageChapter & { clipId: string })[], sentence: () => string }): Promise<void> {
  const cues = clipIds.flatMap((clipId, c) => Array.from({ length: CUES_A_CLIP }, (_, i) => ({ clipId, trackId: trackIds[c]!, startMs: i * CUE_MS, endMs: (i + 1) * CUE_MS, text: sentence() })))
  // Rows that we have just made ourselves: looking up each one's clip, track and build would treble the time.
  await client.query(`set session_replication_role = replica`)
  await client.query(`insert into cues (track_id, clip_id, build_id, start_ms, end_ms, text) select t, c, $1, f, e, x from unnest($2::uuid[], $3::uuid[], $4::int[], $5::int[], $6::text[]) y (t, c, f, e, x)`,
    [build.id, ...(['trackId', 'clipId', 'startMs', 'endMs', 'text'] as const).map(key => cues.map(cue => cue[key]))])
  await client.query(`set session_replication_role = origin`)
  const passages = clipIds.flatMap((clipId) => {
    const own: PassageCue[] = cues.filter(cue => cue.clipId === clipId)
    return cutPassages(build.id, own, chapters.filter(chapter => chapter.clipId === clipId)).map(passage => ({ ...passage, clipId }))
  })
  await client.query(`insert into passages (build_id, session_id, clip_id, track_id, chapter_id, start_ms, end_ms, starts, lines, lexemes)
    select $1, $2, c, t, h, f, e, s::int[], array(select jsonb_array_elements_text(l::jsonb)), v::tsvector from unnest($3::uuid[], $4::uuid[], $5::uuid[], $6::int[], $7::int[], $8::text[], $9::text[], $10::text[]) x (c, t, h, f, e, s, l, v)`,
  [build.id, sessionId, passages.map(p => p.clipId), passages.map(p => p.trackId), passages.map(p => p.chapterId), passages.map(p => p.startMs), passages.map(p => p.endMs),
    passages.map(p => `{${p.starts.join(',')}}`), passages.map(p => JSON.stringify(p.lines)), passages.map(p => p.lexemes.map(lexeme => `'${lexeme}'`).join(' '))])
  build.cues += cues.length
  corpus.cues += cues.length
  corpus.passages += passages.length
}

/** Words of the trade first, being the commonest, then a long tail of words that are said now and then. */
function vocabulary(random: () => number): string[] {
  const trade = [...Object.values(OPERATION_LEXICON).flatMap(words => [words.plain, words.near]), ...SYNONYM_SETS.flat(), ...PART_NAMES].join(' ').match(/[a-z]+/g) ?? []
  const syllables = 'ba be bo da de dri fa fel gan gor ha hol ka kel la lin mar mel na nor pa pel ra rin sa sel ta tor va vin wa wen'.split(' ')
  const tail = Array.from({ length: TAIL_WORDS }, () => Array.from({ length: 2 + Math.floor(random() * 3) }, () => syllables[Math.floor(random() * syllables.length)]).join(''))
  return [...new Set([...shuffled([...new Set(trade)], random), ...tail])].filter(word => stemOf(word).length > 1)
}

function shuffled(list: string[], random: () => number): string[] {
  return list.map(word => ({ word, at: random() })).sort((a, b) => a.at - b.at).map(entry => entry.word)
}

/** Ranks by Zipf's law with exponent 1. */
function zipf(n: number, random: () => number): () => number {
  const sums = new Float64Array(n)
  for (let i = 0, sum = 0; i < n; i++) sums[i] = sum += 1 / (i + 3)
  return () => {
    const at = random() * sums[n - 1]!
    let low = 0
    let high = n - 1
    while (low < high) {
      const middle = (low + high) >> 1
      if (sums[middle]! < at) low = middle + 1
      else high = middle
    }
    return low
  }
}

/** mulberry32: small, good enough, the same everywhere. */
function seeded(seed: number): () => number {
  let state = seed
  return () => {
    state = (state + 0x6D2B79F5) | 0
    let t = Math.imul(state ^ (state >>> 15), 1 | state)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}
