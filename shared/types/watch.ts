import type { FactView } from './facts'
import type { FrameRate } from './media'
import type { Picture } from './search'
import type { Operation, Units } from './trade'

/** What every public page needs: who it is about and where it stands. Only inked chapters are ever in these. */
export interface WatchHead {
  build: { id: string, address: string, name: string, boat: string, about: string }
  /** False for unlisted and private builds: search engines are asked to pass by. */
  listed: boolean
  /** This page's address for links and search engines. */
  canonical: string
}

/** GET /api/watch */
export interface WatchList { builds: WatchListed[], canonical: string }
export interface WatchListed { address: string, name: string, boat: string, about: string, steps: number, stepsShown: number, shownMs: number, picture: Picture | null }

/** GET /api/watch/:address */
export interface WatchBuild extends WatchHead {
  builder: string
  stages: { name: string, steps: WatchStepLine[] }[]
  shownMs: number
  picture: Picture | null
  /** The poster's address, absolute, for link previews. */
  cover: string | null
  /** Questions the footage answers. */
  examples: string[]
}
export interface WatchStepLine { number: number, title: string, chapters: number, shownMs: number, picture: Picture | null }

/** GET /api/watch/:address/steps/:number */
export interface WatchStep extends WatchHead {
  step: { number: number, title: string, stage: string, description: string, materials: string[], parts: { name: string, material: string, thicknessMm: number | null, quantity: number | null }[] }
  chapters: WatchChapter[]
  clips: WatchClip[]
  /** Inked facts said within inked chapters. */
  facts: Pick<FactView, 'id' | 'clipId' | 'atMs' | 'kind' | 'said' | 'value' | 'unit'>[]
  units: Units
  previous: { number: number, title: string } | null
  next: { number: number, title: string } | null
  cover: string | null
}

/** GET /api/watch/:address/moments/:clip */
export interface WatchMoment extends WatchHead {
  clip: WatchClip
  chapters: WatchChapter[]
  /** Captions that start within inked chapters, of the first caption file. */
  lines: { startMs: number, endMs: number, text: string }[]
  cover: string | null
}

export interface WatchChapter {
  id: string
  clipId: string
  startMs: number
  endMs: number
  operation: Operation
  step: { number: number, title: string } | null
  parts: string[]
  note: string
  picture: Picture | null
}

export interface WatchClip {
  id: string
  /** Day of the session, ISO. */
  date: string
  durationMs: number
  src: string | null
  width: number
  height: number
  /** Null where the file does not say. */
  frameRate: FrameRate | null
  poster: string | null
  tracks: { language: string, label: string, src: string }[]
}
