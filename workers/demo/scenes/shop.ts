import { benchStage, mug } from '../drawing/bench'
import { drawStrongback } from '../drawing/boat'
import { blockPlane, grip, palm, pencil, person, pinch, shaving } from '../drawing/figures'
import { write } from '../drawing/lettering'
import { blend, colour } from '../drawing/palette'
import { cheekOutlines, edgeAt, edgeLine, FRAMES, LENGTH, transomOutline, transomSize } from '../drawing/pram'
import { drawShop } from '../drawing/shop'
import { Stage } from '../drawing/stage'
import { ease, flat, mix, on, ramp, type Place, type Vec } from '../drawing/vector'
import { potDrawing } from './bowBench'
import { sway, type Moment, type Scene } from './scene'

/** The shop itself, the drawing on the bench, the plane and the glue pot. */

const shopWide: Scene = ({ p, t, view }) => {
  const k = ease(p, 0.05, 0.55)
  const stage = new Stage(view, { at: [mix(3000, 1500, k), -4200, 1750], to: [mix(3300, 1850, k), 900, 1080], lens: 1.25 })
  drawShop(stage, { beam: 0.22 })
  drawStrongback(stage)
  stage.sprite([560, 1500, 0], person({}), { layer: 2, flip: true })
  stage.face([[-300, 1500, 860], [1500, 1500, 860], [1500, 2100, 860], [-300, 2100, 860]], { fill: colour.bench, stroke: colour.graphite, layer: 2, bias: 300 })
  for (const x of [-250, 1450]) stage.beam([x, 1560, 0], [x, 1560, 830], 90, 90, colour.bench, { layer: 1.8 })
  stage.beam([-300, 1500, 800], [1500, 1500, 800], 40, 110, blend(colour.bench, colour.shadow, 0.2), { layer: 2, bias: 200 })
  stage.sprite([1150, 1650, 860], `<path d="M-70 0L-90 -130Q0 -190 90 -130L70 0Z" fill="${colour.iron}" stroke="${colour.graphite}" stroke-width="8"/><path d="M80 -110L150 -160" stroke="${colour.graphite}" stroke-width="26" stroke-linecap="round"/><path d="M-60 -170Q0 -260 60 -170" fill="none" stroke="${colour.graphite}" stroke-width="12"/>`, { layer: 3 })
  for (let i = 0; i < 3; i++) {
    const rise = (t * 0.35 + i / 3) % 1
    stage.sprite([1310 + sway(t + i, 3) * 25, 1650, 1040 + rise * 420], `<circle r="${40 + rise * 60}" fill="#ffffff" fill-opacity="${0.4 * (1 - rise)}"/>`, { layer: 3 })
  }
  return stage.toSvg()
}

/** The lines plan of the pram on paper, from the offsets. */
const drawingProfile: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, { at: [0, -800, 860], to: [0, -30, 0], lens: 1.35 })
  const paper = flat([0, 0, 0])
  stage.face([[-560, -330, 1], [560, -330, 1], [590, 300, 1], [-575, 310, 1]], { fill: colour.shadow, shaded: false, layer: 0, opacity: 0.3 })
  stage.face([[-570, -320, 2], [570, -320, 2], [570, 310, 2], [-570, 310, 2]], { fill: colour.paper, shaded: false, layer: 1, stroke: colour.graphite, width: 1.2 })
  const s = 940 / LENGTH
  const profile = (v: Vec): Vec => on(paper, (v[0] - LENGTH / 2) * s, v[2] * s * 1.05 + 60, 3)
  const plan = (v: Vec): Vec => on(paper, (v[0] - LENGTH / 2) * s, v[1] * s * 1.05 - 130, 3)
  const line = (points: Vec[], width = 2, stroke: string = colour.graphite, dash?: string) => stage.stroke(points, { layer: 3, width, stroke, dash })
  const [sheer, chine] = [edgeLine('sheer', 1), edgeLine('chine', 1)]
  for (const x of [0, 914, 1829, 2743, 3658]) line([profile([x, 0, -90]), profile([x, 0, 780])], 0.9, blend(colour.pencil, colour.paper, 0.5))
  for (const z of [0, 300, 600]) line([profile([-100, 0, z]), profile([3760, 0, z])], 0.8, blend(colour.pencil, colour.paper, 0.6))
  line([plan([-120, 0, 0]), plan([3780, 0, 0])], 1, colour.redLead, '14 5 3 5')
  for (const points of [sheer, chine]) {
    line(points.map(profile))
    line(points.map(plan))
    line(points.map(([x, y, z]) => plan([x, -y, z])))
  }
  for (const i of [0, -1]) {
    line([profile(sheer.at(i)!), profile(chine.at(i)!)])
    for (const [a, k] of [[sheer, 1], [chine, 1]] as const) line([plan([a.at(i)![0], a.at(i)![1] * k, 0]), plan([a.at(i)![0], -a.at(i)![1] * k, 0])], 1.6)
  }
  for (const x of Object.values(FRAMES)) {
    const [a, b] = [edgeAt('sheer', x, 1), edgeAt('chine', x, 1)]
    line([profile(a), profile(b)], 1.4)
    line([plan(a), plan([x, -a[1], 0])], 1.4)
  }
  write(stage, paper, 'BURDOCK', -540, 262, 26, { layer: 3 })
  write(stage, paper, '12 FT PRAM', 330, 262, 16, { layer: 3 })
  const spot = ease(p, 0.42, 0.5) - ease(p, 0.6, 0.68)
  const bow = profile([60, 0, 480])
  const stern = profile([3600, 0, 300])
  const rest: Vec = [330, -250, 5]
  const target: Vec = p < 0.16 ? rest : [mix(bow[0], stern[0], spot), mix(bow[1], stern[1], spot), 5]
  const k = ease(p, 0.16, 0.26) * (1 - ease(p, 0.72, 0.8))
  const at: Vec = [mix(rest[0], target[0], k), mix(rest[1], target[1], k) + sway(t, 2) * 3 * k, 6]
  stage.sprite([655, 90, 0], mug, { layer: 4, size: 0.9 })
  stage.sprite(at, pencil + `<g transform="translate(36 -30)">${pinch()}</g>`, { layer: 9 })
  stage.sprite([-420, -265, 5], palm(), { layer: 9, flip: true })
  return stage.toSvg()
}

/** Standing in the vice, crown up, planed to the line. */
const bowPlane: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, { at: [-120, -1350, 330], to: [0, 0, 105], lens: 1.55 })
  const place: Place = { o: [0, -440, -190], u: [1, 0, 0], v: [0, 0, 1], n: [0, 1, 0] }
  const outline = transomOutline('bow')
  const size = transomSize('bow')
  stage.plate(place, outline, 9, colour.ply, { layer: 5 })
  stage.stroke([on(place, 0, 0, -1), on(place, 0, size.height + 30, -1)], { stroke: colour.pencil, width: 1.2, layer: 6 })
  write(stage, { ...place, n: [0, -1, 0] }, 'BOW', -34, size.height - 90, 34, { layer: 6 })
  for (const [v, x] of [[90, 0], [130, 8], [215, -6]] as const) stage.stroke([-250, -60, 120, 250].map((u, i) => on(place, u, v + x + i * 3, -1)), { stroke: colour.bronze, width: 1, opacity: 0.25, layer: 5.5 })
  stage.plate({ ...place, o: [0, -455, -230] }, [[-330, 0], [330, 0], [330, 215], [-330, 215]], 12, blend(colour.bench, colour.shadow, 0.15), { layer: 6 })
  for (const x of [-240, 240]) stage.sprite([x, -470, -110], `<circle r="34" fill="${colour.iron}" stroke="${colour.graphite}" stroke-width="3"/><path d="M-80 -20L80 20" stroke="${colour.graphite}" stroke-width="15" stroke-linecap="round"/><path d="M-80 -20L80 20" stroke="${colour.fir}" stroke-width="10" stroke-linecap="round"/>`, { layer: 7 })
  const busy = p > 0.16 && p < 0.86
  const fromRight = p < 0.5
  const stroke = busy ? Math.abs((t / 1.5) % 2 - 1) : 0.2
  const u = fromRight ? mix(300, 30, ease(stroke, 0, 1)) : mix(-300, -30, ease(stroke, 0, 1))
  const k = u / (size.top / 2)
  const at = on(place, u, size.height + 34 * (1 - k * k) + 2, 0)
  const tool = blockPlane + `<g transform="translate(64 -56)">${grip()}</g>`
  stage.sprite(at, tool, { layer: 9, turn: (fromRight ? 1 : -1) * 8 * Math.abs(k), flip: !fromRight })
  for (let i = 0; i < 5 * p + 1; i++) stage.sprite([[-210, 150, 260, -320, 60][i % 5]!, -330 + (i * 41 % 120), 0], shaving(i * 70), { layer: 4 })
  return stage.toSvg()
}

const gluePot: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, { at: [0, -620, 330], to: [10, -60, 120], lens: 1.5 })
  const thick = ramp(p, 0.52, 0.78)
  const bottle = (cap: string, label: string) => `<ellipse cx="10" cy="3" rx="70" ry="14" fill="${colour.shadow}" fill-opacity="0.3"/><path d="M-52 0L-52 -150Q-50 -190 -18 -196L-18 -222L18 -222L18 -196Q50 -190 52 -150L52 0Q0 12 -52 0Z" fill="#efe6cf" stroke="${colour.graphite}" stroke-width="3"/><path d="M-52 -120L52 -120L52 -50Q0 -42 -52 -50Z" fill="${label}" stroke="${colour.graphite}" stroke-width="2"/><path d="M-24 -222h48v-24h-48zM-7 -246h14v-30h-14zM-30 -286h64v12h-64zM-30 -280l-26 12" fill="${cap}" stroke="${colour.graphite}" stroke-width="3"/>`
  stage.sprite([-250, 120, 0], bottle(colour.graphite, colour.green), { layer: 2 })
  stage.sprite([-130, 150, 0], bottle(colour.redLead, colour.mustard), { layer: 2, size: 0.82 })
  stage.sprite([250, 110, 0], `<ellipse cx="10" cy="3" rx="96" ry="18" fill="${colour.shadow}" fill-opacity="0.3"/><path d="M-86 -130L-80 0Q0 16 80 0L86 -130Z" fill="${colour.steel}" stroke="${colour.graphite}" stroke-width="3"/><ellipse cx="0" cy="-130" rx="86" ry="22" fill="${blend(colour.sapele, colour.plyEdge, 0.45)}" stroke="${colour.graphite}" stroke-width="3"/>`, { layer: 2 })
  const contents = blend('#d9b061', colour.glue, thick)
  stage.sprite([0, -120, 0], potDrawing(contents, thick), { layer: 4, size: 1.25 })
  if (p > 0.42 && p < 0.66) {
    const grains = Array.from({ length: 12 }, (_, i) => {
      const fall = (t * 1.4 + i / 12) % 1
      return `<circle cx="${-18 + i * 29 % 40}" cy="${-150 + fall * 130}" r="${4 + i % 3}" fill="${blend(colour.sapele, colour.plyEdge, 0.45)}"/>`
    }).join('')
    stage.sprite([60, -150, 165], grains, { layer: 6 })
    stage.sprite([95, -150, 330], `<path d="M-70 20L-20 -16L60 -30L70 10L-10 40Z" fill="${colour.steel}" stroke="${colour.graphite}" stroke-width="3"/><g transform="translate(70 -10)">${grip({ gloved: true })}</g>`, { layer: 8 })
  }
  const angle = t * 3.2
  const stirring = p < 0.4 || p > 0.64
  if (stirring) {
    const [dx, dz] = [Math.cos(angle) * 46, Math.sin(angle) * 12]
    stage.sprite([dx, -122, 128 + dz], `<g transform="rotate(-60)"><path d="M0 -11L250 -9L250 9L0 11Z" fill="${colour.plyEdge}" stroke="${colour.graphite}" stroke-width="2.4"/></g><g transform="translate(74 -134)">${pinch({ gloved: true })}</g>`, { layer: 7 })
  }
  stage.sprite([-30, -140, 90], palm({ gloved: true }), { layer: 8, flip: true, turn: -30 })
  return stage.toSvg()
}

const sternLeaning: Scene = ({ p, view }) => {
  const k = ease(p, 0.1, 0.7)
  const stage = benchStage(view, { at: [mix(-330, 190, k), -1500, 620], to: [mix(-160, 90, k), 120, 170], lens: 1.5 })
  const place: Place = { o: [0, 120, 0], u: [1, 0, 0], v: [0, 0.42, 0.907], n: [0, -0.907, 0.42] }
  const outline = transomOutline('stern')
  stage.face([[-440, 30, 1], [470, 30, 1], [560, 190, 1], [-400, 190, 1]], { fill: colour.shadow, shaded: false, layer: 0, opacity: 0.3 })
  stage.plate(place, outline, 9, colour.ply, { layer: 3 })
  cheekOutlines('stern').forEach(points => stage.plate({ ...place, o: on(place, 0, 0, 9) }, points, 19, colour.sapele, { layer: 4 }))
  stage.plate({ ...place, o: on(place, 0, 0, 9) }, [[-95, 300], [95, 300], [95, 366], [-95, 366]], 19, colour.sapele, { layer: 4 })
  write(stage, { ...place, o: on(place, 0, 0, 11) }, 'STERN', -130, 190, 44, { layer: 5 })
  write(stage, { ...place, o: on(place, 0, 0, 11) }, '42 1/2', 190, 300, 30, { layer: 5 })
  stage.sprite([620, -60, 0], mug, { layer: 6 })
  stage.sprite([-560, -140, 0], potDrawing(colour.glue, 1), { layer: 6 })
  const point = ease(p, 0.68, 0.78)
  if (point > 0) stage.sprite(on(place, mix(420, 60, point), mix(120, 390, point), 20), palm(), { layer: 9 })
  return stage.toSvg()
}

export const shopScenes: Record<string, (moment: Moment) => string> = {
  'shop-wide': shopWide, 'drawing-profile': drawingProfile, 'bow-plane': bowPlane, 'glue-pot': gluePot, 'stern-leaning': sternLeaning,
}
