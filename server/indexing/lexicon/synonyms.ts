/**
 * Other words for the same thing on a shop floor, one set a line: a question with one finds the others, for a
 * little less than the word itself. Phrases stand for themselves. Common practice, no source.
 */
const SETS = `screw, screws, wood screw
nail, ring nail, ring shank
rivet, rove
bolt, carriage bolt, coach bolt
fastener, screw, nail, bolt, rivet, fixing
epoxy, resin, goop, thickened epoxy
filler, wood flour, silica, microballoons, thickener
plywood, ply, sheet, panel
fiberglass, glass cloth, glass tape, cloth
timber, lumber, board, stock
side panel, side plank, plank, side
bottom panel, bottom
transom, stern board, back board
chine log, chine, chine stringer
gunwale, rubrail, rub rail, outwale
inwale, inner gunwale
keel, keelson, hog
skeg, fin
frame, bulkhead, mold, rib, former
stem, stem post, bow post
seat, thwart, bench
strongback, building frame, building jig
knee, corner brace, breasthook
oar, paddle
rowlock, row lock
bevel, angle, taper
gap, space, crack
wax paper, plastic, release film, parcel tape
sandpaper, abrasive, grit
clamp, cramp, clamps
pencil line, mark
template, pattern
varnish, clear coat
mast step, mast foot
daggerboard, centerboard, leeboard
rudder, tiller
heat, warm, heater, temperature
cure, set, harden, go off, kick
thick, thickness
wide, width
long, length
boat, hull
straight, true, in line, aligned
spread, apply, put on
runny, thin
mixture, ratio, mix`

/** Each phrase with the other phrases of its sets. */
export const SYNONYM_SETS: readonly (readonly string[])[] = SETS.split('\n').map(line => line.split(',').map(phrase => phrase.trim()))
