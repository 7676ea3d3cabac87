import { colour } from './palette'

/** Drawings of hands, people and tools in millimetres, y down, for `Stage.sprite`. */

const ink = (width = 3) => `stroke="${colour.graphite}" stroke-width="${width}" stroke-linejoin="round" stroke-linecap="round"`

export interface HandLook { gloved?: boolean, sleeve?: string }

function finger(points: string, fill: string, wide = 19): string {
  return `<path d="${points}" fill="none" stroke="${colour.graphite}" stroke-width="${wide + 5}" stroke-linecap="round" stroke-linejoin="round"/><path d="${points}" fill="none" stroke="${fill}" stroke-width="${wide}" stroke-linecap="round" stroke-linejoin="round"/>`
}

function arm(fill: string, sleeve: string): string {
  return `<path d="M52 28L150 108L186 62L74 -18Z" fill="${fill}" ${ink()}/>`
    + `<path d="M118 128L1900 1640L2030 1450L180 30Z" fill="${sleeve}" ${ink(3.5)}/>`
    + `<path d="M108 126L136 150L204 56L172 28Z" fill="${sleeve}" ${ink(3.5)}/>`
    + `<path d="M190 120L330 236M230 96L300 150" fill="none" ${ink(2.5)} stroke-opacity="0.4"/>`
}

const tone = ({ gloved }: HandLook) => gloved ? colour.glove : colour.skin

/** Fingers closed on something at the origin; the arm runs down to the right. */
export function grip(look: HandLook = {}): string {
  const fill = tone(look)
  return arm(fill, look.sleeve ?? colour.green)
    + `<path d="M-22 -34Q28 -62 74 -18Q96 20 56 44Q10 60 -24 32Z" fill="${fill}" ${ink()}/>`
    + finger('M20 -34Q-16 -44 -30 -26', fill)
    + finger('M24 -12Q-20 -22 -36 -4', fill)
    + finger('M22 10Q-18 2 -32 16', fill)
    + finger('M26 30Q-6 26 -18 36', fill, 16)
}

/** Thumb and two fingers on a thin tool at the origin. */
export function pinch(look: HandLook = {}): string {
  const fill = tone(look)
  return arm(fill, look.sleeve ?? colour.green)
    + finger('M52 34Q18 44 6 22', fill, 17)
    + `<path d="M20 -26Q66 -48 92 -2Q98 34 66 46Q34 52 20 22Z" fill="${fill}" ${ink()}/>`
    + finger('M40 18Q14 26 4 6', fill, 17)
    + finger('M44 -22Q12 -30 -4 -4', fill, 17)
    + finger('M34 12Q14 18 2 2', fill, 16)
}

/** Flat on a surface, fingers to the upper left. */
export function palm(look: HandLook = {}): string {
  const fill = tone(look)
  return arm(fill, look.sleeve ?? colour.green)
    + finger('M10 36Q-18 46 -40 34', fill, 20)
    + finger('M14 -26L-46 -62', fill)
    + finger('M6 -10L-66 -34', fill)
    + finger('M4 8L-70 -8', fill)
    + finger('M8 24L-58 16', fill, 16)
    + `<path d="M-2 -34Q34 -54 76 -16Q94 22 54 44Q20 56 -4 34Q-16 0 -2 -34Z" fill="${fill}"/>`
    + `<path d="M10 -40Q44 -48 76 -16Q94 22 54 44Q40 50 24 48" fill="none" ${ink()}/>`
}

export const pencil = `<g transform="rotate(-50)"><path d="M0 0L16 -5L130 -5L130 5L16 5Z" fill="${colour.redLead}" ${ink(2)}/><path d="M0 0L16 -5L16 5Z" fill="${colour.plyEdge}" ${ink(2)}/><path d="M0 0L6 -2L6 2Z" fill="${colour.graphite}"/></g>`

export const blockPlane = `<path d="M-105 0L-92 -32L-30 -40L66 -40Q104 -36 108 -14L108 0Z" fill="${colour.iron}" ${ink()}/><path d="M-30 -40L34 -74L52 -66L10 -40Z" fill="${colour.brass}" ${ink(2.5)}/><circle cx="-72" cy="-44" r="15" fill="${colour.sapele}" ${ink(2.5)}/><path d="M-105 -2L108 -2" ${ink(4)} stroke-opacity="0.6"/>`

export const longPlane = `<path d="M-260 0L-260 -34L-120 -40L220 -40L250 -26L250 0Z" fill="${colour.sapele}" ${ink()}/><path d="M-260 -6L250 -6" ${ink(2)}/><path d="M-150 -40Q-166 -96 -132 -96Q-108 -92 -116 -40Z" fill="${colour.fir}" ${ink(2.5)}/><path d="M90 -40Q84 -118 140 -122Q168 -118 150 -84Q142 -60 156 -40Z" fill="${colour.fir}" ${ink(2.5)}/><path d="M-12 -40L34 -104L52 -98L28 -40Z" fill="${colour.steel}" ${ink(2.5)}/>`

export const jigsaw = `<path d="M-8 0L-8 62L6 70L8 0Z" fill="${colour.steel}" ${ink(2)}/><path d="M-96 -10L92 -10L92 4L-96 4Z" fill="${colour.steel}" ${ink(2.5)}/><path d="M-70 -10L-78 -86Q-72 -128 -30 -132L86 -140Q148 -138 146 -96L140 -72L112 -72Q108 -104 74 -102L20 -98Q8 -70 40 -44L40 -10Z" fill="${colour.green}" ${ink(3)}/><path d="M-60 -60L-4 -64M-58 -44L-6 -48" ${ink(3)} stroke-opacity="0.6"/>`

export const drill = `<path d="M-150 -4L-62 -4L-62 4L-150 4Z" fill="${colour.steel}" ${ink(2)}/><path d="M-74 -20L-44 -26L-44 26L-74 20Z" fill="${colour.iron}" ${ink(2.5)}/><path d="M-44 -40L96 -42Q124 -38 122 0Q118 34 96 38L78 40L92 160L26 160L14 40L-44 40Z" fill="${colour.mustard}" ${ink(3)}/><path d="M10 152L112 152L118 206L4 206Z" fill="${colour.iron}" ${ink(3)}/><path d="M12 44L4 66L22 74Z" fill="${colour.redLead}" ${ink(2)}/>`

export const hammer = `<path d="M-12 -4L6 -4L250 96L240 118Z" fill="${colour.fir}" ${ink(2.5)} transform="rotate(-16)"/><path d="M-26 -44L22 -38L12 44L-32 40Q-44 0 -26 -44Z" fill="${colour.iron}" ${ink(3)}/>`

export const chisel = `<g transform="rotate(40)"><path d="M-9 0L9 0L9 96L-9 96Z" fill="${colour.steel}" ${ink(2)}/><path d="M-13 96L13 96L17 196L-17 196Z" fill="${colour.sapele}" ${ink(2.5)}/></g>`

/** A brush whose tip is at the origin. */
export const brush = (loaded: string = colour.glue) => `<g transform="rotate(-52)"><path d="M0 -16L46 -20L46 20L0 16Q-10 0 0 -16Z" fill="${loaded}" ${ink(2)}/><path d="M46 -21L70 -19L70 19L46 21Z" fill="${colour.steel}" ${ink(2)}/><path d="M70 -12L196 -8L200 0L196 8L70 12Z" fill="${colour.fir}" ${ink(2.5)}/></g>`

/** A flat stick whose end is at the origin. */
export const stick = `<g transform="rotate(-58)"><path d="M-4 -11L200 -9L200 9L-4 11Q-12 0 -4 -11Z" fill="${colour.plyEdge}" ${ink(2.2)}/></g>`

/** A screw clamp seen from the side; its jaws close on the origin, `open` is their gap in mm. */
export function clampTool(open = 40, turn = 0): string {
  const knob = Math.cos(turn) * 26
  return `<path d="M-14 ${-open / 2 - 16}L96 ${-open / 2 - 16}L96 150L-16 150L-16 132L74 132L74 ${-open / 2}L-14 ${-open / 2}Z" fill="${colour.iron}" ${ink(3)}/>`
    + `<path d="M-7 ${open / 2 + 8}L7 ${open / 2 + 8}L7 212L-7 212Z" fill="${colour.steel}" ${ink(2)}/><path d="M-18 ${open / 2}L18 ${open / 2}L14 ${open / 2 + 12}L-14 ${open / 2 + 12}Z" fill="${colour.redLead}" ${ink(2)}/>`
    + `<path d="M${-knob} 206L${knob} 214" ${ink(9)}/><path d="M${-knob} 206L${knob} 214" stroke="${colour.redLead}" stroke-width="6" stroke-linecap="round"/>`
}

/** Someone standing, feet at the origin, looking left; 1.7 m tall. */
export function person(look: { jersey?: string, apron?: string, hair?: string, cap?: string, reach?: number } = {}): string {
  const { jersey = colour.green, apron = colour.mustard, hair = '#6d4a33', cap, reach = 0.4 } = look
  const hand = [-230 - 260 * reach, -1180 + 250 * (1 - reach)]
  return `<ellipse cx="20" cy="0" rx="330" ry="40" fill="${colour.shadow}" fill-opacity="0.22"/>`
    + `<path d="M-110 -800L-130 -20L-220 0L-30 0L20 -560L60 -10L-10 10L170 6L150 -800Z" fill="#54504c" ${ink(9)}/>`
    + `<path d="M-120 -1330Q-140 -1000 -130 -760L170 -760Q190 -1080 140 -1340Q20 -1420 -120 -1330Z" fill="${jersey}" ${ink(9)}/>`
    + `<path d="M-126 -1180L60 -1200L70 -500L-150 -520Z" fill="${apron}" ${ink(8)}/><path d="M-130 -960L64 -970" ${ink(5)} stroke-opacity="0.5"/>`
    + `<path d="M-46 -1380L-30 -1470L70 -1480L80 -1370Z" fill="${colour.skinShade}" ${ink(8)}/>`
    + `<path d="M-120 -1560Q-120 -1690 6 -1700Q130 -1690 128 -1560Q120 -1440 10 -1436Q-60 -1440 -92 -1490L-128 -1512Z" fill="${colour.skin}" ${ink(8)}/>`
    + (cap
      ? `<path d="M-112 -1590Q-100 -1724 24 -1724Q146 -1710 142 -1570L-60 -1584L-186 -1560Q-190 -1590 -112 -1590Z" fill="${cap}" ${ink(8)}/>`
      : `<path d="M-104 -1600Q-100 -1740 30 -1738Q176 -1724 156 -1520Q150 -1400 96 -1420Q70 -1500 60 -1580Q-20 -1570 -104 -1600Z" fill="${hair}" ${ink(8)}/>`)
    + `<path d="M40 -1300Q10 -1160 ${hand[0]! + 150} ${hand[1]! - 60}" fill="none" stroke="${colour.graphite}" stroke-width="124" stroke-linecap="round" stroke-linejoin="round"/><path d="M40 -1300Q10 -1160 ${hand[0]! + 150} ${hand[1]! - 60}" fill="none" stroke="${jersey}" stroke-width="106" stroke-linecap="round"/>`
    + `<path d="M${hand[0]! + 130} ${hand[1]! - 50}L${hand[0]} ${hand[1]}" fill="none" stroke="${colour.graphite}" stroke-width="78" stroke-linecap="round"/><path d="M${hand[0]! + 130} ${hand[1]! - 50}L${hand[0]} ${hand[1]}" fill="none" stroke="${colour.skin}" stroke-width="62" stroke-linecap="round"/>`
}

/** Curled shavings. */
export function shaving(turn: number): string {
  return `<path d="M0 0Q-30 -46 -64 -24Q-84 0 -58 12Q-38 12 -44 -4" fill="none" ${ink(9)} transform="rotate(${turn})"/><path d="M0 0Q-30 -46 -64 -24Q-84 0 -58 12Q-38 12 -44 -4" fill="none" stroke="${colour.plyEdge}" stroke-width="6" stroke-linecap="round" transform="rotate(${turn})"/>`
}
