/**
 * Plain words that people ask with and builders answer with, one meaning a line: a question says "remove",
 * "warped" or "at the front", the builder "pull", "a twist in her" or "the pointy end". Unlike the trade's synonyms they
 * are too common to search by; they only lend weight to what was found otherwise. Common practice, no source.
 */
const TABLE = `warp, warped, twist, twisted, winding, square, true, bent, wonky, skew, crooked, racked, wind
straight, true, fair, in line, level, flat, even, symmetrical, square, even sided
remove, take off, take out, pull, pull out, get out, get off, come off, back out, strip, knock off, lift off, undo, get rid, pry, draw
stuck, jammed, seized, frozen, won't move, won't come, won't budge, stuck fast, solid, broken loose, bound
attach, fix, hold, secure, join, fasten, connect, mount, stick, screwed, glued, bolted, tie, tied
hold, keep, stay, stop, prevent, in place, located, can't move, can't go, held, holding
slip, slide, slides, sliding, move, shift, creep, skate, wander
start, begin, first, where do we start, get going, beginning
order, sequence, first, then, next, after, before, out of order
finish, end, last, done, finished
fill, filler, filled, putty, plug, thickened, stop, patch, fairing compound
gap, space, daylight, light, crack, opening, open, void, hollow, slide a, gaping, loose, let go, standing off, sprung
touch, touching, contact, meet, close, closed, tight, lands, sit, sits, sitting, seat, bear
rock, rocks, rocking, wobble, tip, unsteady, see saw, hang up, hung up
high, proud, bump, lump, hump, stands up, sticks up, raised, high spot, high spots
low, hollow, dip, shy, low spot
height, high, tall, up from, down from, measure down, measure up, how far up, level
width, wide, across, broad, narrow, breadth
thickness, thick, thin, mil, gauge, sixteenths
depth, deep, how far in, down below, below the surface
length, long, short, longer, shorter
size, big, large, small, wide, long, dimension, dimensions
distance, apart, far, spacing, spaced, every, between, centres, centers, gap between, interval
near, close, next to, beside, by, alongside, adjacent
angle, bevel, degrees, slope, slant, tilt, lean, leaning, rake, pitch, taper, on a slant, cant
diagonal, angle, slant, forty five degrees, crosswise, across the grain
front, bow, forward, stem, pointy end, fore, up front, at the front, nose, head
back, stern, aft, after, transom, behind, tail, astern, stern end
bottom, underside, lower, underneath, under, below, downward, floor
top, upper, above, over, upward, sheer
middle, centre, center, midpoint, halfway, amidships, midships
side, sides, port, starboard, each side, other side, left, right
edge, edges, lip, rim, margin, corner, side
corner, inside corner, angle, joint, chine
end, ends, tip, point, extremity
inside, inner, inboard, interior, within, in behind
outside, outer, outboard, exterior, out here, final skin
upright, plumb, vertical, straight up, stand up
lengthwise, fore and aft, along, end to end, long way
sideways, across, athwart, crosswise, port to starboard
plank, planks, strake, board, strip, planking
strip, strips, plank, stave, batten
frame, frames, rib, ribs, timber, bulkhead, mold, mould, form, station, floor
form, forms, mold, mould, moulds, molds, station, stations
panel, side, sheet, plywood, ply, bottom
wood, timber, lumber, stock, board, piece
piece, part, bit, section, stick, block, blank
tray, box, housing, container, shelf, compartment
pipe, tube, conduit, hose, duct
wire, wires, tie, ties, stitch, stitches, copper, cable
cable, wire, lead, welding cable
rope, line, cord, string, twine, lashing
cord, string, twine, lashing, sinew, thread
string, cotton, oakum, caulking, caulk
skin, layer, veneer, covering, cloth, fabric, canvas, planking
fabric, cloth, canvas, skin, nylon, polyester
cloth, glass, fiberglass, tape, fabric, glass cloth
support, supports, riser, cleat, bed, beds, bearer, beam, bracket, mount, logs, log, ledger
supports, beams, beam, cleats, bearers
brace, prop, strut, stay, shore
stiff, strong, rigid, strength, stiffness, solid, flex
weak, flimsy, break, split, crack, let go, fail, snap, short grain
split, crack, splits, splitting, perforation, check
break, broke, broken, snap, snapped, crack, let go, fail
bend, bent, bending, curve, curved, flex, spring, force, twist, persuade
curve, curved, round, bend, sweep, arc, hollow
shape, plane, profile, form, carve, template, section, contour, outline
template, pattern, tracing, cardboard, scrap, stick
copy, transfer, trace, pattern, mark, reproduce, template
mark, marks, line, lines, tick, pencil, dot, dots, draw, drawn, scribe
measure, measured, tape, check, size, find, work out
find, locate, work out, see, know, spot, look, figure out
check, test, see if, make sure, look, know, sight, try, tell, prove, verify, press, judge, believe
trust, believe, rely, prefer, go by
choose, decide, pick, settle, reckon, made up my mind
change, different, instead, swap, alter, other way, deviate, modified, switch
instead, rather than, not, other than, against, alternative, in place of
compare, difference, versus, better, worse, than
better, best, good, prefer, rather, proper
bad, wrong, trouble, problem, mistake, mess, ruin, useless
problem, trouble, wrong, issue, gone wrong, fault, mistake
cause, reason, because, why, due, from, happens, doing
mistake, wrong, error, my fault, my own doing, cock up, chicken, messed up, screwed up, forgot
repair, fix, mend, cure, cured, sort, put right, put back, solve, remedy, deal, correct, patch
fit, fits, fitted, fitting, sit, sits, drop in, goes home, snug, seat, land
trim, cut, shave, pare, take off, plane, saw, reduce, notch, relief
smooth, even, fair, flush, sand, sanded, vanish, neat, clean
flush, even, level, vanish, smooth
rough, coarse, scuff, key, tooth, scratch, grit
sharp, sharpen, edge, blade, dull, blunt
tool, gadget, jig, trick, device, stick, block, spreader, paddle
trick, method, way, technique, how, what i do, what you do, secret, tip, best way, the thing is
glue, epoxy, resin, adhesive, goo, gunk, goop, carpenter's glue, sealant, bond, bonded, stick, bonding
sealant, rubbery, polyurethane, bedding compound, goop, mastic, caulk, bedding, tube
putty, thickened, fillet, peanut butter, goo, filler, compound, paste
mix, mixed, mixture, stir, ratio, made of, recipe, blend, batch, parts
consistency, thick, thickness, stiff, runny, peanut butter, mayonnaise, mustard, ketchup, honey, mashed potato, cream, syrup
run, sag, slump, drip, drips, droop
excess, squeeze out, squeezed out, extra, ridges, leftover, surplus, pushes out
hardener, slow, medium, fast, part b, hardener speed
dry, cure, cured, set, harden, hardened, go off, gone off, firm, firmed up, kick, tacky, dry to touch, green
wait, leave, left, time, minutes, hours, overnight, days, how long, before
time, minutes, minute, hour, hours, day, days, overnight, seconds, week
working time, pot life, open time, minutes, timer
quick, fast, hurry, quickly, rush, before it
slow, slowly, gently, easy, careful, take your time
ready, when, thumbnail, enough, done, you can, tell, test
hot, heat, warm, temperature, degrees, heater, summer
cold, cool, chilly, degrees, winter, fridge
wet, damp, soaked, water, moist, moisture, rag
leak, leaks, leaking, seep, seeping, water, weep, drip, pin hole, watertight
waterproof, watertight, seal, sealed, keep water out, tight, swell, soak
swell, swells, expand, swelling, moves, movement, shrink, shrinks, buckle
rot, rotten, decay, soft, punky, water sits
seal, sealed, coat, treat, treated, soak, saturate, oil, primer, paint, linseed, preservative
coat, coats, layer, layers, film
treat, oil, linseed, paint, soak, coat, coats, prime, preservative
paint, painting, painted, coat, primer, brush, varnish
brush, roller, spread, apply, applied, put on, spreader
comb, notched, ridges, spreader, trowel, grooved
bubble, bubbles, air, trapped, void
screw, screws, bolt, fastener, fasteners, fixing, number
fastener, screw, nail, rivet, bolt, staple, peg
nail, nails, spike, hammer, drive, rivet, clench
tip, point, end
hammer, drive, hit, mallet, tap, knock, bang
tighten, tight, snug, torque, crank, quarter turn, pull, wrench, finger tight, cinch
loose, slack, let go, came loose, wobbly, not tight
slack, spare, extra, loop, leave yourself
hole, holes, drill, drilled, bore, bored, pilot, opening
pre drill, drill, pilot, holes, drilled, predrill
line up, align, aligned, alignment, lined up, straight, match, string, in line
match, same, matching, identical, both, equal, pair
cutout, cutouts, notch, notches, slot, slots, gap, relief, opening
notch, slot, cutout, gain, rebate, recess, housing
joint, seam, join, scarf, butt, lap, meet, meets, overlap
overlap, lap, land, laps, lapped
weave, woven, interlace, zip, herringbone
clamp, clamps, press, squeeze, weight, pressure, weights, hold down, held
weight, heavy, pounds, kilos, light, load, mass
load, stress, strain, pressure, pull, force
weigh, pounds, weight, kilos
safe, danger, careful, comfortable, risk, hurt, dangerous
safety, gloves, mask, goggles, respirator, finger
mess, dirty, clean, wipe, rag, wash
clean, wipe, scrape, tidy, rag, clean up, lift off
smell, stink, fumes, solvent
noise, sound, sounds, hear, ring, tick
sound, sounds, hear, tone, listen
look, looks, see, appearance, notice, show
cheap, cost, price, money, expensive, dollars, pounds
save, avoid, without, so you don't, waste
necessary, need, have to, must, important, matter, required, worth
skip, leave out, without, don't, bare, leave that
allowed, can, may, could
against, case against, objection, nothing wrong, don't like, disagree, never
plan, plans, drawing, designer, book, instructions, sheet, calls for, list, supposed to
person, somebody, someone, helper, guy, fella, people
two, both, pair, couple, twin
one, single, alone, by myself
several, few, many, lots
next, following, other, another, later
previous, last, before, earlier
final, last, outer, outermost, finish
root, roots, knee, crook, grown, hackmatack, natural
grain, fibre, fibers, run of the wood, end grain
saw, sawing, cut, rip, blade
plane, planed, planing, shavings, shave, take off, flat, flats
rout, router, bit, bead, cove, mill
sand, sanding, sandpaper, grit, abrade, scuff
round, radius, rounded, ease, cove, soften
cover, covered, hide, hidden, bury, wrap, over
hide, invisible, unseen, never see, nobody noticed, conceal
lift, raise, pick up, hoist, raised
turn over, flip, roll, upside down
stretch, stretched, taut, tight, tension, shrink, pull
wrinkle, wrinkles, pucker, crease, fold
needle, thread, sew, stitch, seam
fold, tuck, wrap, turn under
rubber, rubbery, gasket, flexible, seal
electric, electrical, battery, wire, power, fuse
engine, motor, shaft, prop, propeller
boat, hull, she, her
wear, chafe, rub, worn
launch, water, float, afloat, trailer
bow, stem, forefoot, prow, front end, fore end
stern, transom, stern post, back end, after end, tail end
keel, keelson, backbone, hog, bottom
gunwale, gunnel, rail, outwale, inwale, rub rail, top edge, sheer
rail, gunwale, capping, rubbing strip, rub rail
chine, shine, corner, stringer, chine log, knuckle
stringer, stringers, longitudinal, chine, batten
rib, ribs, timbers, hoops, frames, bent
deck, top, foredeck, deck beam, ridge
deck beam, deck beams, beam, beams, cross piece, cross pieces, thwart, supports
cockpit, coaming, hole, rim, opening, hoop
coaming, hoop, rim, ring, lip, combing
seat, thwart, bench, sit, backrest
paddle, oar, oars, blade, loom
mast, spar, pole, boom, yard
sail, sails, canvas, rig
rudder, tiller, steering, blade, pintle
centerboard, daggerboard, board, foil, case, trunk, leeboard
case, trunk, box, slot
cabin, cuddy, roof, coachroof, cabin top, house
window, windows, portlight, port, lens, glass, acrylic, glazing
hatch, hatches, lid, cover, opening, door
bulkhead, bulkheads, wall, divider, partition, web frame
wall, walls, side, sides, bulkhead, panel
locker, cupboard, storage, compartment, stowage
tank, buoyancy, flotation, watertight, foam, air
hull, shell, boat, outside, skin
shell, planking, hull, skin
rivet, rivets, nail, rove, roves, copper, clench
rove, roves, washer, burr, cap, cone
washer, washers, rove, pad, backing, backing plate
peg, pegs, dowel, pin, trunnel, trenail, toothpick, cocktail stick
pin, pins, dowel, bolt, peg, rod
lashing, lashings, lash, lashed, wraps, twine, tied, binding, tie
knot, hitch, tie, square knot, half hitch
wrap, wraps, turn, turns, loops, round
stitch, stitches, sew, sewn, sewing, thread, needle, wire
tension, tight, tight enough, pull, taut, stretch, drum
wet, soak, soaked, damp, water, dip
steam, steamed, steaming, kettle, boiler, hot, cook, boil
bend, steam, bent, former, over the knee
mould, former, form, jig, template, station
former, jig, form, mould, block
springback, spring back, open up, opens up, relax, straighten
over bend, extra, tighter, spring back
layers, plies, laminations, strips, veneers, laminate
laminate, laminated, glued up, layers, strips, plies
scarf, scarph, joint, join, feather, splice, slope, eight to one, twelve to one
splice, scarf, join, joined
mortise, socket, hole, slot, pocket
tenon, tongue, end, shoulder
bevel, chamfer, taper, slope, angle, rolling bevel
rabbet, rebate, groove, slot, step, land
groove, slot, kerf, channel, rabbet
taper, tapered, thinner, narrow, fade, runs out, goes away
spile, spiling, pattern, shape of the plank, dots, tick
batten, strip, stick, spline, flexible
lofting, loft, full size, offsets, draw, floor
offsets, numbers, table, measurements, dimensions
centre line, center line, middle, string, centreline
string, line, wire, laser, straight
level, spirit level, bubble, plumb, flat
plumb, upright, vertical, level, bob
square, right angle, ninety degrees, perpendicular, diagonals
diagonals, corner to corner, square, measure across
symmetry, symmetrical, same both sides, mirror, both sides, matches
weigh, weight, heavy, pounds, kilos, light
strength, strong, stronger, holds, stiffness
flexible, bendy, give, floppy, soft, springy
hard, stiff, solid, firm, dense
soft, softer, easy, crush, dent
brittle, crack, snap, shatter
sticky, tacky, grab, stick to
thin, runny, watery, unthickened, straight, neat
thicken, thickened, thick, flour, powder, silica, peanut butter
powder, flour, silica, dust, fluffy, talc, filler
dust, sawdust, flour, powder
colour, color, dark, red, grey, white, stain, pigment, tint
stain, dark, black, colour, mark
shiny, gloss, glossy, shine, blush, satin
dull, matt, flat, scuff
blush, amine, greasy, waxy, wash, water
wash, water, rinse, soap, scrub
degrease, acetone, wipe, solvent, oily
oil, oily, linseed, grease, danish oil, tung
tar, pine tar, stockholm tar, turpentine, linseed
turpentine, turps, thinner, solvent, thinners
varnish, clear, finish, coats
finish, coat, varnish, oil, paint, final
number of coats, coats, three coats, two coats, layers
sandpaper, grit, eighty, one twenty, paper
between coats, sand, scuff, overnight, recoat
recoat, second coat, next coat, again
fabric, skin, cloth, nylon, polyester, canvas
shrink, iron, heat, tighten, tight
iron, heat gun, hot, shrink
scissors, cut, knife, blade, hot knife, snip
knife, blade, cut, score
pencil, mark, line, draw, scribe
chalk, blue, mark, rub, high spot, carbon, black
compass, dividers, scribe, spacer, block
template, cardboard, door skin, pattern, ply, hot glue
tape, masking tape, packing tape, plastic
plastic, packing tape, wax paper, polythene, release, won't stick
release, won't stick, plastic, wax, tape, unstick
clamp, spring clamp, bar clamp, strap, peg, clothes pin, weights, bricks
strap, straps, ratchet, band, rope, bungee
weights, bricks, sandbags, paint tins, lead, sack
wedge, wedges, shim, shims, packing, spacer
shim, packer, veneer, wedge, sliver, paper
spacer, block, gap, stick
backing, pad, block, behind, doubler
reinforce, strengthen, doubler, stiffener, brace, backing, extra
doubler, pad, backing, reinforcement, thickening
drill bit, bit, brad point, size, diameter
diameter, across, hole, size, bit
countersink, head, flush, sink, below
head, heads, top, slot
pilot, pilot hole, lead hole, drill first, predrill
depth stop, tape, stop, how deep
plug, bung, cap, grain, dowel
tear out, splinter, blow out, chip, break out, backing
splinter, tear out, blow out, chip, ragged
vibrate, chatter, shake, rattle
wander, drift, off line, straight
guide, fence, jig, block, stop
fence, guide, edge, straight edge
repeat, every, each, same, over and over
every, each, all, apart
equal, same, even, matching, both
offcut, scrap, waste, left over
scrap, offcut, waste, practice
test piece, scrap, practice, trial
practice, try, scrap, test
first time, last boat, before, learned
lesson, learned, mistake, last time, next time
regret, mistake, should have, wish, wrong
advice, recommend, would, should, better
recommend, prefer, use, like, better
material, wood, made of, ash, oak, spruce, cedar, pine, larch, fir, plywood
wood species, ash, oak, spruce, cedar, pine, larch, fir, mahogany, okoume, birch
bronze, stainless, copper, brass, galvanised, galvanized, steel, iron
metal, bronze, stainless, copper, brass, aluminium, aluminum, steel
stainless, bronze, rust, corrosion, metal
rust, corrode, corrosion, stain, eat, green
knot, knots, grain, clear, defect
defect, knot, crack, flaw, shake
sapwood, heartwood, rot, heart
heel, foot, bottom, end
shoulder, neck, side
knee, knees, legs, kneel, brace
foot, feet, footrest, pegs, toes
back, backrest, behind, spine
comfort, comfortable, sit, sore, bum
height above, up from, above, clearance
clearance, room, gap, space, clear
room, space, clearance, access
reach, get at, access, can't get
access, get in, reach, hatch
drain, drains, limber, water runs, hole
water, drain, sit, trap, limber
limber, drain, water, notch
ventilate, air, breathe, dry out
foam, insulation, float, pour
insulate, foam, warm, lining
door, hatch, hinge, opening
hinge, hinges, pivot, swing, fold
handle, grip, hold, grab
engine, motor, outboard, inboard, diesel
fuel, tank, petrol, diesel, gas
pump, bilge, water, hose
hose, pipe, tube, clamp
fuse, breaker, amp, protect, battery
crimp, terminal, lug, connector, joint
connector, terminal, lug, crimp, plug
solder, crimp, joint, heat
switch, panel, breaker
ground, earth, negative, bonding
volt, volts, voltage, meter, amps
thread, threads, tap, bolt, screw
washer, nut, spanner, wrench
anchor, rode, chain, cleat
cleat, cleats, block, horn, batten
ring, eye, loop, shackle
trailer, truck, roof, transport, carry
carry, lift, transport, shoulder, yoke
help, helper, hand, somebody, people, two of us
alone, by myself, single handed, no help
child, kid, boy, girl, daughter, son
friend, neighbour, neighbor, buddy, mate
disagree, argue, people say, some people, wrong
rumour, reputation, people say, they say, myth
traditional, old way, grandfather, always, old fashioned
modern, new, plywood, epoxy, fancy
faster, quicker, save time, speed
reuse, again, keep, save, use it again
throw away, bin, toss, waste
store, keep, stack, flat, put away
protect, cover, guard, stop, against
damage, hurt, ruin, dent, scratch, mark
dent, crush, mark, bruise
scratch, scrape, mark, score
bump, knock, hit, bang
missing, forgot, lost, left out, gone
forgot, missed, left out, should have
extra, more, spare, additional, another
less, reduce, smaller, thinner, fewer
add, put, extra, more, another
double, two, twice, second
half, halfway, middle, fifty
quarter, fourth, four
count, number, many, how many, pieces
several lengths, pieces, number
top up, refill, more, again
settle, sink, soak, drop
expand, swell, grow, bigger
contract, shrink, smaller, tighten
absorb, soak, drink, drinks, suck, sucks
penetrate, soak in, into the wood, deep
trapped, caught, stuck, inside
escape, run out, way out, let out, nowhere to go
hinder, stop, in the way, in my road
obstacle, in the way, hit, hits, runs into, foul
collide, hit, foul, run into
support, hold up, prop, under, carry
sag, droop, dip, hang
hang, hung, droop, suspend`

/** Each meaning's phrases. */
export const EVERYDAY_SETS: readonly (readonly string[])[] = TABLE.split('\n').map(line => line.split(',').map(phrase => phrase.trim()))
