import type { Operation } from '#shared/types/trade'

/**
 * How each operation is spoken of. `plain` words name it outright; `near` words go with it often enough to
 * count for something. Common practice, no source.
 */
export interface OperationWords { plain: string, near: string }

export const OPERATION_LEXICON: Record<Exclude<Operation, 'none'>, OperationWords> = {
  'mark-out': {
    plain: 'mark out, marked out, mark, layout, lay out, loft, lofting, scribe, trace, draw round, transfer, strike a line, prick through',
    near: 'pencil, pattern, template, measure, square off, centre line, center line, batten, offsets, tape measure, spiling',
  },
  'cut': {
    plain: 'cut, cut out, saw, rip, crosscut, trim, chop, slice, notch',
    near: 'kerf, jigsaw, blade, bandsaw, table saw, circular saw, pull saw, offcut, score, rough out',
  },
  'shape': {
    plain: 'shape, plane, bevel, spokeshave, carve, round over, rasp, chamfer, taper, bend, spring in, scarf',
    near: 'shavings, steam, rolling bevel, block plane, chisel, router, drawknife, winding, radius',
  },
  'dry-fit': {
    plain: 'dry fit, fit dry, test fit, trial fit, dry run, offer up, try in, fit',
    near: 'check the fit, snug, gap, mock up, dry, sits flush, lands, ease',
  },
  'drill': {
    plain: 'drill, bore, pilot hole, countersink, ream',
    near: 'bit, hole, brace and bit, auger, drill press, counterbore',
  },
  'seal-coat': {
    plain: 'seal coat, seal, saturate, prime with epoxy, wet out the wood, precoat, coat',
    near: 'end grain, soak in, thin epoxy, unthickened, hot coat, roller',
  },
  'glue': {
    plain: 'glue, glue up, epoxy, bond, adhesive, adhere, stick, glued and clamped, bed, butter up',
    near: 'thicken, clamp, squeeze out, cure, resin, hardener, filler, wood flour, mix, pot life, cotton fibre, joint',
  },
  'fasten': {
    plain: 'fasten, screw, nail, bolt, rivet, lash, stitch, peg, clench, drive, staple, wire together',
    near: 'ring nail, silicon bronze, washer, rove, driver, copper wire, twist, wire, hammer, trenail, dowel',
  },
  'fillet': {
    plain: 'fillet, filleting, radius the corner, cove',
    near: 'corner, spoon, tongue depressor, thickened, peanut butter, inside corner, radius',
  },
  'laminate': {
    plain: 'laminate, glass, fiberglass, lay up, layup, wet out, tape the seam, sheathe, cloth',
    near: 'glass cloth, tape, squeegee, layer, weave, peel ply, matt, roller, dry spots',
  },
  'sand-fair': {
    plain: 'sand, fair, fairing, longboard, smooth, abrade, scrape, sanding block',
    near: 'grit, sandpaper, orbital, dust, high spot, low spot, batten, fair curve, filler, hump',
  },
  'paint': {
    plain: 'paint, varnish, primer, prime, enamel, top coat, roll and tip, oil',
    near: 'brush, second coat, gloss, tip off, undercoat, roller, masking tape, recoat',
  },
  'clean-up': {
    plain: 'clean up, clean, tidy, sweep, wipe, wipe up, scrape off',
    near: 'vacuum, denatured alcohol, rag, vinegar, acetone, excess, squeeze out, drips, bench',
  },
  'plan-talk': {
    plain: 'plan, drawing, table of offsets, instructions, deviation, measurements',
    near: 'book, designer, page, dimension, decide, change, instead, reason, next time, sequence',
  },
}
