import { KINDS, type Lattice, W } from '#server/indexing/pencil/lattice'
import type { Fitted } from '#server/indexing/pencil/pencil'
import type { PlanPart, PlanStep, SpokenClip } from '#server/indexing/pencil/types'

/** Numbers from -1 to 1 that are the same in every run. */
export function numbers(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 31 - 1
  }
}

export interface Telling { chapters: { i: number, j: number, step: number | null, kind: number }[], score: number }

const USED = [0, 3, W, W + 1, W + 2]

/** A lattice of a few cues with scores by chance: two operations and the three kinds without a step come into question. */
export function tinyLattice(seed: number, options: { S?: number, nodes?: number[], seams?: number[], startsOn?: number, only?: Lattice['only'], allowed?: Lattice['allowed'], alive?: Lattice['alive'] } = {}): Lattice {
  const { S = 2, nodes = [0, 2, 3, 6], seams = [], startsOn = 0, only = () => null, allowed = () => true, alive = () => true } = options
  const random = numbers(seed)
  const table = (size: number) => Float64Array.from({ length: size }, random)
  const cells = new Map<string, { steps: Float64Array, kinds: Float64Array }>()
  const cell = (i: number, j: number) => cells.get(`${i} ${j}`)!
  for (let i = 0; i < nodes.length; i++) for (let j = i + 1; j < nodes.length; j++) cells.set(`${i} ${j}`, { steps: table(S), kinds: Float64Array.from({ length: KINDS }, (_, kind) => USED.includes(kind) ? random() : -Infinity) })
  const turns = table(nodes.length)
  return {
    S, startsOn, nodes, only, allowed, alive,
    earliest: () => 0,
    steps: (i, j, list, count, out) => {
      for (let at = 0; at < count; at++) out[list[at]!] = cell(i, j).steps[list[at]!]!
    },
    kinds: (i, j, out) => out.set(cell(i, j).kinds),
    fit: table(S * W), fitRate: table(S * W),
    long: (i, j) => (nodes[j]! - nodes[i]!) / 4,
    turn: i => turns[i]!,
    seam: i => seams.includes(i),
    move: table((S + 1) * S), change: table(W * W), begins: table(W), toStepless: table(3), again: random(),
  }
}

/** Every way to tell a session, with its score by the definitions in `Lattice`, one chapter after another. */
export function allTellings(lattice: Lattice): Telling[] {
  const { S, nodes } = lattice
  const last = nodes.length - 1
  const tellings: Telling[] = []
  const states = [...Array.from({ length: S }, (_, s) => s), null].flatMap(step => USED.filter(kind => (kind >= W) === (step === null)).map(kind => ({ step, kind })))
  const own = (i: number, j: number, step: number | null, kind: number): number => {
    const only = lattice.only(i, j)
    if (only && (only.step !== step || only.kind !== kind)) return -Infinity
    if (step !== null && !only && !lattice.alive(i, j, step)) return -Infinity
    const kinds = new Float64Array(KINDS)
    lattice.kinds(i, j, kinds)
    if (step === null) return kinds[kind]!
    const steps = new Float64Array(S)
    lattice.steps(i, j, Int32Array.of(step), 1, steps)
    return steps[step]! + kinds[kind]! + lattice.fit[step * W + kind]! + lattice.fitRate[step * W + kind]! * lattice.long(i, j)
  }
  const entering = (i: number, before: Telling['chapters'][number] | undefined, memory: number, step: number | null, kind: number): number => {
    if (!before) {
      if (step === null) return lattice.toStepless[kind - W]!
      return step + 1 === memory ? 0 : lattice.move[memory * S + step]! + lattice.begins[kind]!
    }
    const turn = lattice.turn(i)
    if (before.step === step && before.kind === kind && lattice.seam(i)) return 0
    if (step === null) {
      if (before.step !== null) return turn + lattice.toStepless[kind - W]!
      return before.kind === kind ? -Infinity : turn + lattice.again + lattice.toStepless[kind - W]!
    }
    if (step + 1 !== memory) return turn + lattice.move[memory * S + step]! + lattice.begins[kind]!
    return turn + (before.step === null ? lattice.move[memory * S + step]! : lattice.change[before.kind * W + kind]!)
  }
  const on = (i: number, chapters: Telling['chapters'], memory: number, score: number): void => {
    if (i === last) {
      tellings.push({ chapters, score })
      return
    }
    for (let j = i + 1; j <= last; j++) {
      if (!lattice.allowed(i, j) || lattice.earliest(j) > i) continue
      for (const { step, kind } of states) {
        const more = entering(i, chapters.at(-1), memory, step, kind) + own(i, j, step, kind)
        if (more > -Infinity) on(j, [...chapters, { i, j, step, kind }], step === null ? memory : step + 1, score + more)
      }
    }
  }
  on(0, [], lattice.startsOn, 0)
  return tellings
}

export function logSumExp(values: number[]): number {
  const max = Math.max(...values)
  return max + Math.log(values.reduce((sum, value) => sum + Math.exp(value - max), 0))
}

const step = (number: number, stage: string, title: string, description: string, parts: string[], materials: string[] = []): PlanStep => ({ number, stage, title, description, parts, materials })
const part = (name: string, aliases: string[] = []): PlanPart => ({ name, aliases, material: '', thicknessMm: null })

/** A small plan of our own. */
export const STEPS = [
  step(1, 'Hull', 'Scarf the side panels', 'Plane 8 to 1 slopes on the ends and glue them with thickened epoxy.', ['side panel'], ['epoxy']),
  step(2, 'Hull', 'Make the transom', 'Laminate two layers of plywood and plane the bevel on its lower edge.', ['transom'], ['plywood']),
  step(3, 'Hull', 'Bend the keelson', 'Steam the oak keelson and clamp it over the frames.', ['keelson'], ['oak']),
  step(4, 'Finish', 'Varnish the rails', 'Brush three coats of varnish on the outwales.', ['outwale'], ['varnish']),
]
export const PARTS = [part('side panel', ['sides']), part('transom', ['stern board']), part('keelson', ['hog']), part('outwale', ['rail'])]

/** Talk about each step, five cues of four seconds. */
export const TALK: Record<number, string[]> = {
  1: ['okay so the side panels get their scarf', 'plane the slope on the ends of the side panel', 'eight to one on both side panels', 'mix thickened epoxy for the scarf', 'spread the epoxy and glue the scarf'],
  2: ['right now the transom', 'two layers of plywood for the transom', 'plane the bevel on the transom', 'the lower edge of the transom wants more bevel', 'that transom is done'],
  3: ['so next the keelson', 'steam the oak for the keelson', 'the keelson goes over the frames', 'clamp the keelson hot', 'the oak keelson bends over the frames'],
  4: ['okay now varnish', 'brush varnish on the outwales', 'second coat of varnish on the rail', 'keep a wet edge on the varnish', 'varnish on the outwale looks good'],
}

export function clipOf(texts: string[], options: { fromMs?: number, everyMs?: number, durationMs?: number } = {}): SpokenClip {
  const { fromMs = 0, everyMs = 4000, durationMs } = options
  return { cues: texts.map((text, i) => ({ startMs: fromMs + i * everyMs, endMs: fromMs + (i + 1) * everyMs - 200, text })), ...(durationMs === undefined ? {} : { durationMs }) }
}

export const talk = (...steps: number[]): string[] => steps.flatMap(number => TALK[number]!)

const curve = [[0, 0], [1, 1]] as const
const weights = {
  'step.title': 0.8, 'step.description': 0.5, 'step.part': 0.8, 'step.topic': 0.3, 'heard.work': 0.5, 'heard.planTalk': 0.5, 'heard.cleanUp': 0.5, 'none.chat': 1, 'none.rate': -0.5, 'stepless.rate': -0.5,
  'turn.always': -2, 'turn.okay': 1.5, 'turn.so': 1.5, 'to.plus1': -1, 'to.plus2': -2, 'to.plus3to5': -3, 'to.further': -4, 'to.minus1': -3, 'to.back': -3, 'to.none': -1, 'to.steplessPlanTalk': -3, 'to.steplessCleanUp': -3,
}
/** A model by rule of thumb: what is tested with it is how the program works, not how well its weights are fitted. */
export const PLAIN: Fitted = { open: { weights, curve }, ticked: { weights, curve } }
