import type { SpokenClip } from '../pencil/types'
import { joinCues } from './joinCues'
import type { SpokenFact } from './types'

const NOUN = String.raw`(?:e?poxy|a poxy|epoxies|resin|glue|adhesive|polyurethane|resorcinol|urea formaldehyde|hide glue|contact cement|sealant|mastic|bedding compound|caulk|goop|seam compound|seam putty|white lead|red lead|pitch|marine glue|pine tar)`
const QUALITY = String.raw`(?:straight|neat|plain|unthickened|thickened|slow|fast|medium|ordinary|normal|regular|just|only|basically|good|some|a bit of|a little|yellow|white|brown|waterproof|exterior|carpenter'?s'?|wood|wood ?worker'?s|polyurethane|two[- ]part|one[- ]part|marine|clear|black|rubber|urea|laminating|gap[- ]filling|foaming|polysulphide|polysulfide|butyl|tropical|winter|summer|high[- ]strength)`
/** How much of it: "a smear of sealant" names the sealant; a coat of resin sticks nothing. */
const SOME = String.raw`(?:(?:a|the) (?:\w+ )?(?:bead|smear|dab|dollop|line|spot|blob) of )?`
const WITH = String.raw`(?:\s+(?:with|and|plus|thickened with)\s+(?:(?:a|some|the|bit|little|pinch|lot|of|bunch|fine|fluffy|white|high|low|density|colloidal|stirred|fumed|milled|chopped|cotton|wood|sanding|phenolic|glass)\s+)*(?:flour|silica|microfibres?|microfibers?|micro ?balloons|fibres?|fibers?|dust|filler|powder|flock|cotton|talc|microspheres|balloons|thickener))*`
/** What names a substance as the one in hand: "this is epoxy", "it's just yellow carpenter's glue", "I'm using the slow epoxy". */
const STATED = new RegExp(String.raw`\b(?:this is|stuff is|that is|that's|it's|it is|is just|these are|they're|using|use|used|\w+ed (?:it |them |that )?(?:up |down |in |together )?with|having|they get|it gets|that gets|get|gets|goes in with|stick it with|stuck with|glued with|bonded with|go with|going with|i'm on|adhesive is|glue is|glue,? it's|bed it in|bedded in|bedding it in|bedded on|set in|stick it on with|stuck it on with|stuck it down with)\s+${SOME}((?:(?:the|a|an|our|my|this)\s+)?(?:${QUALITY},?\s+)*${NOUN}${WITH})\b`, 'gi')
const NEGATED = /\b(?:not|never|don't|didn't|doesn't|won't|wouldn't|isn't|can't)\s+$/i

/**
 * Glues, resins and sealants that are named as what is in use, each once in ten minutes. Value and unit are null:
 * what is stated is a substance.
 */
export function hearAdhesives(clip: SpokenClip): SpokenFact[] {
  const { text, startMsAt } = joinCues(clip)
  const facts: SpokenFact[] = []
  for (const match of text.matchAll(STATED)) {
    const words = match[1]!.replace(/^(?:the|an?|our|my|this|just|only|basically)\s+/i, '')
    const offset = match.index + match[0].length - words.length
    if (NEGATED.test(text.slice(0, match.index))) continue
    const atMs = startMsAt(offset)
    // "It's the glue day" names no glue; "it gets epoxy" may be any, "it gets unthickened epoxy" is a choice.
    if (/^(?:glue|resin|adhesive)$/i.test(words) || (/^(?:(?:they |it |that )?gets? |\w+ed )/i.test(match[0]) && /^\w+$/.test(words))) continue
    const key = words.toLowerCase()
    if (facts.some(fact => fact.text.toLowerCase() === key && atMs - fact.atMs < 600_000)) continue
    facts.push({ atMs, kind: 'adhesive', text: words, value: null, unit: null })
  }
  return facts
}
