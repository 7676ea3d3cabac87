/**
 * What belongs together in a boat shop: tools, materials, places on the boat and turns of phrase that go with
 * one kind of work, one topic a line. A step of a plan and a stretch of talk that touch the same topic are
 * likelier to be the same work, though they may share no word: the plan says "draw the wires", the builder
 * talks of side cutters and a soldering iron. A star marks a word that is hardly ever used for anything else,
 * a question mark one that is often used otherwise. Common practice, no source.
 */
const TABLE = `stitching: stitch*, stitches*, wire, wires, copper wire*, twist, twists, twisted, pliers, ties, tie, zip ties*, cable ties*, loose, snug up, tighten, quarter turn, hinge?, chine edge, holes?, butterfly
drawing wires: draw the wires*, pull the wires*, side cutters*, snips*, soldering iron*, cut the wires*, wires out, nippers, heat the wire*, stuck in the glue
tacking: tack, tacks, tacking, dabs, spot weld*, between the wires*, between the stitches*, between wires, tack weld
filleting: fillet*, fillets*, fill it, cove?, putty, peanut butter, radius, paddle, tongue depressor*, spoon*, icing, pastry bag*, sandwich bag*, piping bag*, squeeze, caterpillar, ridges, wood flour?, silica?, rounded fillet, inside corner, thickened
taping: tape, glass tape*, fiberglass tape*, woven tape, wet it out, wet out, chip brush, clear, unroll, seam, seams, weave, air bubble, peel ply, selvedge, staggered, green?
sheathing: cloth*, glass cloth*, glass?, fiberglass, squeegee*, drape*, wrinkle, wrinkles, wet out, wet it out, weave, roller, drain, drips, runs, fill coat*, fill coats*, bury the weave*, overlap, sheathe, dry spots, pucker, puckers
epoxy: epoxy, a poxy, resin, hardener, part a, part b, pumps, pump, mixing cup, cup, pot life, kick, kicked, kicking, cure, cures, cured, fast, slow, medium hardener, thickened, thicken, wood flour, silica, microballoons, fluffy, stir, stirred, mix, mixed, batch, peanut butter, mayonnaise, ketchup, honey
carpenter glue: carpenter's glue*, yellow glue*, white glue*, wood glue*, bead of glue, squeeze out, nozzle, bottle, polyurethane glue*, resorcinol*, urea*, hide glue*, powder glue*
bedding: bed, bedding*, bedding compound*, sealant*, sealer, caulk?, mastic*, butyl*, polysulphide*, polysulfide*, polyurethane sealant*, goop, squeeze, caulking gun*, cartridge*, skeleton gun*, bead
clamping: clamp, clamps, clamped, cramp, cramps, spring clamp, bar clamp, squeeze out, weights, bricks, pads, wax paper, overnight
scarfing: scarf*, scarph*, scarfs*, scarfed*, 8 to 1, eight to one, slope, feather edge, stacked, stair step, steps?, glue line?, butt strap*, butt block*
lofting: loft*, lofting*, offsets*, offset, table of offsets*, batten, fair curve, points, station, stations, nails, weights, ducks, sheer line, half breadth*, half breadths*, full size, grid, base line, baseline, draw, spring
station moulds: mold, molds, form, forms, station, stations, plumb*, level, square, string, center string*, strongback*, spirit level, brace, braces, align, aligned, sight, sight down, horn?, packing tape
strongback: strongback*, strong back*, ladder frame*, building jig*, jig, trestle, trestles, sawhorses, box beam*, beam?, legs, casters, true, twist, straight, string, joists, building frame
strip milling: strip, strips, rip, ripped, ripping, planer, thickness planer, thicknesser, table saw, fence, feather board*, featherboard*, bead*, cove, round, hollow, router table*, bit, bits, pass, passes, infeed, outfeed
strip planking: strip, strips, staple, staples*, stapler*, stapled*, sheer strip*, masking tape, bead, cove, edge, edge glue, cedar, whisky plank*, whiskey plank*, taper, wedge, bilge, hollow, form, forms, carpenter's glue, row, rows, bungee
staple pulling: pull staples*, draw staples*, staple puller*, staple holes*, pulling staples*, draw every staple*, staples out
planking: plank, planks, planking, strake, strakes, garboard*, sheerstrake*, sheer strake*, binder, hang, hung, land, lands, lap, laps, gain, gains*, rolling bevel, spiling*, spile*, spiled*, hood end*, hood ends*, spiling batten*, tuck, broad strake*, plank line, backing out
clinker laps: lap, laps, land*, lands*, gain*, gains*, bevel, clamp, clinker*, lapstrake*, overlap, plank clamp, nippers?
riveting: rivet*, rivets*, riveting*, rove*, roves*, rover, peen*, peening*, dolly*, bucking*, buck, nip, nippers, snips, copper nail*, copper nails*, burr, burrs*, set, hammer, ball peen*, dome, clench*, clenched*
steaming: steam*, steamed*, steaming*, steam box*, kettle*, boiler*, wallpaper steamer*, minutes, hot, gloves, oven gloves*, bend, bent, hour an inch*, hour per inch*, rib, ribs, cooked, cook, boil, noodle, spaghetti
ribs: rib*, ribs*, timber?, timbers*, steam, bend, hot, fit, gunwale, keel, notch, mortise, limber*
frames: frame, frames, gusset, gussets, floor timber, futtock*, bulkhead, bulkheads, sawn frame, side frame, station, bottom frame, cleat, crosspiece, cross spall*, limber hole*, notch, notches
bulkhead: bulkhead*, bulkheads*, doubler, cleat, cleats, watertight, compartment, hatch, template, scribe, tabbing, tab, tabbed, door skin, cardboard
transom: transom*, back end, stern board, rake, flare, bevel, pattern, motor well, sculling notch*, cheek, crown, framing, fashion piece*
transom fitting: hang the transom*, offer, daylight, binding, hangs up, rocking, wire, between the sides, edge
stem work: stem*, stems*, forefoot*, apron*, stempost*, rabbet*, rebate*, knee, bow, cutwater*, inner stem, outer stem, nose, laminate, former, layers, band clamp, false stem
keel work: keel*, keelson*, hog*, deadwood*, sternpost*, stern post, keel plank*, plank keel, rabbet, garboard, backbone*, gripe, ballast, keel bolt, bolts, worm shoe*, shoe
skeg: skeg*, fin, scribe, centre line, center line, stern, tapered, wedge, dividers, keel strip
chines: chine*, chine log*, chine logs*, chines*, shine, bevel, kerf, bent, spanish windlass*, notch, notches, chine stringer, twist
stringers: stringer*, stringers*, longitudinal, longitudinals, batten, lash, lashed, pegs, chine
skin frame joints: mortise*, mortises*, tenon*, tenons*, peg*, pegs*, pegged*, dowel, dowels, lash*, lashing*, lashings*, lashed*, twine*, sinew*, artificial sinew*, wraps, frapping*, frapping turn, deck beam, deck beams, gunwale, waxed, knot, hitch, hitches
deck beams: deck beam*, deck beams*, beam, beams, carlin*, carlins*, carling*, crown, camber, masik*, foot brace, knee, half lap, dovetail*, beam shelf*, clamp?
skinning: skin*, skinning*, canvas*, nylon*, polyester*, sew*, sewing*, sewn*, needle*, thread*, stretch, stretched, iron*, heat gun*, shrink*, shrunk*, fabric*, seam, baseball stitch*, whip stitch*, running stitch*, wet, taut, wrinkle, wrinkles, stretcher
coaming: coaming*, coamings*, combing, cockpit*, lip, hoop, rim, steam, laminate, cockpit rim, spraydeck*, spray skirt*, oval, former
coating skin: coat, goop, polyurethane, two part, drips, dye, urethane, pour, spread, brush, roller, runs
deck: deck*, decks*, decking, king plank*, covering board*, margin, ply, panel, carlin, foredeck*, side deck*, side decks*, laid deck, screws, hatch, deck plate, screw holes, caulk
cabin: cabin*, cabin top*, coachroof*, coach roof*, cabin side, cabin sides, companionway*, hatch, washboard*, washboards*, slide, garage, beams, headroom, grabrail, grab rail
windows: portlight*, portlights*, window*, windows*, port, ports, acrylic*, polycarbonate*, lens, gasket, butyl, oversize, protective film, bolts
hatches: hatch*, hatches*, locker, lid, hinge, hinges*, gasket, coaming, latch, deck plate, inspection hatch
seats: seat, seats, thwart*, thwarts*, bench, riser*, risers*, seat riser, cleat, knees, height, sit, row, sternsheets*, stern sheets*, slats, seat top, seat tops, buoyancy, web, webbing*, caning, cane*, dowels, hang
buoyancy: buoyancy*, tank, tanks*, foam*, watertight, air tank, flotation*, inspection hatch, seal, compartment, airtight, leak test
knees: knee*, knees*, breasthook*, breast hook*, quarter knee*, quarter knees*, lodging knee, hanging knee, crook, grain, natural crook, grown, bow, corner, template, bevels
rails: gunwale, gunnel, gunnels, rail, rails, outwale*, outwales*, inwale*, inwales*, rub rail*, rubrail*, rubbing strake*, rubbing strip*, clamps, every clamp, spring on, spring, ends, sheer, spacer*, spacers, spacer block, scupper*, scuppers*, bend
floors: floorboard*, floorboards*, sole*, bottom boards*, bottom board*, floor, slats, cleats, footrest, foot stretcher*, stretcher, stretchers, sole boards*
centreboard: centerboard*, centerboard case*, daggerboard*, dagger board*, case, trunk*, slot, pivot, pin, foil, leeboard*, bed logs*, bedlog, logs, plate, lead, gasket
rudder: rudder*, rudders*, tiller*, pintle*, pintles*, gudgeon*, gudgeons*, stock, cheeks, blade, head, tiller extension, hang
foils: foil*, foils*, section, leading edge*, trailing edge*, template, profile, airfoil, aerofoil, teardrop, blank, lead
mast and spars: mast*, spar*, spars*, boom*, yard*, gaff*, sprit*, hollow, birdsmouth*, bird's mouth*, staves*, stave, taper, eight sided*, sixteen*, spar gauge*, round, tapered, truck, heel, eight-siding
mast step: mast step*, step, partner*, partners*, tenon, heel, rake, mast thwart, wedges, doubler, compression post
rigging: rig*, rigging*, halyard*, halyards*, sheet?, sheets?, sail*, sails*, block, cleat, cleats, splice*, shroud*, shrouds*, stay, stays, forestay*, lace, lacing, chainplate*, chain plate*, chainplates*, turnbuckle*, bottlescrew*, toggle, swage, swaged, tension, deadeye*, deadeyes*, lanyard*, thimble*, lashing
oars: oar*, oars*, blade, loom, leather*, leathers*, button, shaft, paddle, handle, spoon
rowing gear: oarlock*, oarlocks*, rowlock*, rowlocks*, socket*, sockets*, thole*, thole pin*, tholes*, pad, pads, block, blocks
motor: motor*, engine*, motor bed*, motor beds*, engine bed, beds, shaft*, shaft log*, stern tube*, stuffing box*, coupling*, propeller*, prop*, strut, cutless*, cutlass bearing*, align, alignment, feeler gauge*, outboard*, thrust, mount, mounts, bore
electrics: wire, wiring*, battery*, batteries*, fuse*, fuses*, breaker*, breakers*, crimp*, crimps*, crimper*, terminal*, terminals*, heat shrink*, gauge, switch, panel?, volts*, amp*, amps*, bus bar*, busbar*, cable*, cables*, conduit*, charger*, positive, negative, ground, solder, lugs*, lug, tinned*, loom, multimeter*, ammeter, meter
plumbing: through hull*, seacock*, hose*, bilge pump*, pump?, strainer*, drain, bung, plug, garboard drain, drain plug
caulking: caulk*, caulking*, cotton*, oakum*, caulking iron*, caulking wheel*, mallet, putty, seam, seams, pay, paying, irons, roll, twist, compound, tuck
nailing: nail*, nails*, ring nail*, ring nails*, hammer, clench*, boat nails*, galvanised, galvanized, bronze ring, ring shank*, punch, nail set, predrill
screwing: screw, screws, screwed, drive, driver, countersink, counterbore, pilot, pilot hole, bronze, silicon bronze, stainless, plug, plugs, bung, bungs, drill bit, torque, snug, wax
plugging: plug*, plugs*, bung*, bungs*, grain, flush, chisel, trim, plug cutter*, screw heads, fill
bolting: bolt*, bolts*, nut, nuts, washer, washers, spanner, wrench, carriage bolt, coach bolt, threaded rod
sawing: saw, sawn, sawing, sawed, jigsaw*, bandsaw*, circular saw*, table saw, pull saw*, handsaw*, hand saw*, blade, kerf, cut, cutting, line, offcut, rough out, waste, japanese saw*
pattern: pattern*, patterns*, template*, templates*, cardboard*, trace, traced, tracing, hot glue, door skin, tick stick*, joggle stick*, paper
planing: plane, planed, planing, block plane*, jack plane*, shavings*, shaving, spokeshave*, spoke shave*, drawknife*, draw knife*, power plane*, rasp, line, chalk, grain, tear out, sharpen, iron
bevelling: bevel*, bevels*, bevelled*, beveled*, bevel gauge*, sliding bevel*, bevel board*, rolling bevel*, angle, degrees, batten, lie flat, land flat
fairing hull: fair*, fairing*, longboard*, long board*, torture board*, fairing compound*, microballoons*, filler, guide coat*, high spot*, high spots*, low spot*, low spots*, hollows, lumps, batten, sand, sanding, grit, screed, trowel, spline
sanding: sand, sanding*, sanded*, sander*, sandpaper*, grit*, eighty grit, dust, random orbit*, orbital*, disc, dust mask, respirator, scraper, scrape, scraped, scraping, smooth, vacuum, tack cloth
varnishing: varnish*, varnishing*, varnished*, coat, coats, brush, tip, tipping, gloss, thinned, thinner, thinners, sags, sag, runs, wet edge, tack rag*, tack cloth*, badger*, foam brush*, oil, oiled, linseed*, tung*, tar, turpentine
painting: paint*, painted*, painting*, primer*, prime, primed, undercoat*, enamel*, topcoat*, top coat, coat, coats, roll and tip*, roller, tip, colour, color, masking tape, mask, waterline*, boot top*, boot stripe*, antifouling*, anti fouling*, bottom paint*, tin, stir, deck paint, nonskid, non skid
seal coating: seal*, sealed*, seal coat*, saturate*, unthickened*, straight epoxy*, end grain*, soak, soak in, drinks it, coat, roller, penetrating*, primer, cpes
turning over: turn over*, turned over*, turn her over*, flip*, flipped*, roll over*, rolled over*, right side up*, upside down, helpers, lift, lift off*, cradle*, cradles*, slings, horses, turning
dry fitting: dry, dry fit, fit, offer, offer up, offered, try it, trial, gap, daylight, tight, snug, touching, drop in, no glue
twist check: twist, twisted, winding, winding sticks*, wind*, diagonal*, diagonals*, sight, sight across, straight sticks, square, level, plumb, string, measure corner, corner
drilling: drill*, drilled*, drilling*, bore, bored, boring, bit, holes, hole, pilot, countersink*, auger*, brace, jig, hole saw*, bradawl, depth stop
marking: mark, marked, marking, pencil*, tick, ticks, square, combination square*, line, measure, measured, tape, ruler, centre line, center line, spacing, dividers*, compass*, scribe*, scribed, gauge, chalk line*, straight edge, straightedge, template, batten
ripping stock: rip, ripped, ripping, resaw*, resawn*, thickness, planer, mill, milled, milling, rough sawn*, boards, stock, board, plank, timber, grain, knots
laminating wood: laminate*, laminated*, laminating*, laminations*, lamination, layers, layer, veneer*, veneers*, former, forms, jig, spread, glue both sides, clamp, clamps, spring back*, springback*, plies, vacuum bag*
cold moulding: veneer*, veneers*, diagonal, cold mold*, cold molded*, staples, vacuum bag*, layer, second layer, strips, plastic strip, wire under
hollow and yoke: yoke*, carry, portage, shoulder, shoulders, balance, carve, carving
launching: launch*, launching*, trailer*, slip, slipway, ramp, afloat, float, floats, water, painter*, ring, trim
hardware: cleat, cleats, fairlead*, fairleads*, eye, eyes*, ring, rings, chock, chocks, padeye*, bow eye*, fittings*, bronze, hardware, strap, band, keel band*, half oval*, half round*, brass strip*
repair: rot*, rotten*, punky*, soft, repair*, repairs*, replace, replaced, patch*, patched, dig out, sister*, sistered*, dutchman*, graving piece*, old, original, water damage, leak, leaks, delaminated*, multitool, oscillating
stripping paint: strip, old paint*, heat gun*, scraper, paint stripper*, chemical, blister, bubbling, flaking, bare wood
names and plates: hull number*, hull identification*, name board*, nameboard*, lettering*, registration*, carve the name, badge`

export interface TopicWord {
  topic: number
  /** 2 for words of this topic alone, 1, or 0.5 for words often used otherwise. */
  weight: number
}

export interface Topic { name: string, words: readonly { phrase: string, weight: number }[] }

export const TOPICS: readonly Topic[] = TABLE.split('\n').map((line) => {
  const [name, words] = line.split(': ') as [string, string]
  return {
    name,
    words: words.split(', ').map(word => ({
      phrase: word.replace(/[*?]$/, ''),
      weight: word.endsWith('*') ? 2 : word.endsWith('?') ? 0.5 : 1,
    })),
  }
})
