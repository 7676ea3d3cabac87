import { evenCues } from './evenCues'
import type { SpokenClip } from './types'

/** A place where the speaker says that something was done off camera. */
export interface ToldPlace { clip: number, /** Start of the cue in which the words start, ms. */ atMs: number, words: string }

/** Said outright: no film of it. */
const OUTRIGHT = [
  /\boff[- ]camera\b/, /\boff[- ]screen\b/, /\bnot on camera\b/, /\bbehind the scenes\b/,
  /\b(?:didn'?t|did not|never|haven'?t|hadn'?t|wasn'?t|forgot to|couldn'?t|don'?t|not|nobody|no one|none of (?:it|that|this|them)(?: was| is)?)\s+(?:\w+\s+){0,3}?(?:film(?:ed|ing)?|record(?:ed|ing)?|video(?:ed)?|on camera|on film|get (?:that|it|any of (?:it|that|this)) on)\b/,
  /\b(?:camera|phone|battery|card|memory card)\s+(?:\w+\s+){0,3}?(?:was off|wasn'?t on|was (?:charging|dead|flat|full|pointing|inside|in my pocket)|died|had died|ran out|gave up|quit|went flat|went dead|fell over|stopped|decided|turned itself off|switched itself off|filled up|was still in)\b/,
  /\b(?:while|when|after|before)\s+the\s+(?:camera|phone|battery)\b/,
  /\b(?:between|in between)\s+(?:clips|videos|sessions|episodes|films|takes|recordings)\b/,
  /\bwith nobody watching\b|\bwhen (?:you|nobody|no one) (?:weren'?t|was(?:n'?t)?) (?:here|looking|watching)\b|\bwithout you\b|\byou (?:weren'?t|were not) (?:here|there|invited)\b/,
  /\byou (?:didn'?t|did not|haven'?t) (?:miss|see|saw|seen)\b|\byou missed\b|\byou'?ll (?:just )?have to (?:take my word|believe me|trust me|imagine)\b|\btake my word\b|\byou(?:'re| are) not (?:getting|seeing) that\b|\bspare you\b|\bspared you\b|\bsaved you\b/,
  /\b(?:no|isn'?t any|not any|any) (?:footage|film|video|pictures?) of (?:it|that|this|them)\b|\bno (?:footage|film|video|pictures?)\b|\bthere'?s no (?:footage|film|video)\b/,
  /\bwithout (?:the |a |any )?(?:camera|phone|film)\b/,
  /\bby myself with (?:the )?(?:camera|phone) off\b|\b(?:camera|phone) off\b/,
  /\b(?:i'?d|i would|we'?d|we would|would) have (?:film|show|record)\w*\b|\bmeant to (?:film|record|show)\b|\bnothing to (?:film|show)\b/,
  /\b(?:hands|gloves) (?:were|was) too (?:sticky|gluey|dirty|mucky)\b/,
  /\bforgot to (?:press|hit|push|turn|switch|start|film|record)\b|\bthought i (?:was|had been|had) (?:film|record|press|hit)\w*\b|\b(?:film|record)(?:ed|ing) (?:my|the) (?:foot|feet|floor|ceiling|pocket|lap|wall|roof|thumb|knee|shoes?|boots?)\b|\bof (?:his|her|my|their) thumb\b/,
]

/** Work of another time, told as done. */
const DONE = String.raw`(?:made|cut|glued|did|done|sanded|fitted|fit|drilled|screwed|nailed|riveted|bent|planed|painted|primed|varnished|sealed|coated|scarfed|laminated|bored|shaped|bevelled|beveled|marked|finished|filleted|taped|glassed|bonded|milled|ripped|sawn|sawed|pulled|lashed|pegged|sewed|stitched|set|hung|built|put|ran|run|turned|flipped|cleaned|scraped|faired|roughed|carved|steamed|oiled|mixed|poured|got|took|went ahead|knocked|chopped|traced|lofted|wired|crimped|soldered|mounted|clamped|dry fitted|stripped|caulked|bedded|plugged|bunged|epoxied|rolled|brushed|tacked|fastened|bolted|measured|squared|laid|offered|hauled|dragged|swept|fetched|dug|let|left|brought|picked|worked|went|trimmed|rounded|carried|pinned|closed|sewn|hemmed|wound|wrapped|tied|moved|routed|cast|filled|soaked|assembled)`
const WHEN = String.raw`(?:last night|last (?:week|weekend|month|winter|autumn|summer|spring|thursday|friday|saturday|sunday|monday|tuesday|wednesday)|at the weekend|all week|the night before|yesterday|(?:on )?(?:monday|tuesday|wednesday|thursday|friday|saturday|sunday)(?: (?:night|morning|evening|afternoon))?|(?:in|over|during) the (?:week|evenings?|weekend|winter|holidays?)|(?:earlier|one night|one evening|midweek|the other (?:day|night|evening))|this morning|before (?:breakfast|work|supper|dinner|you (?:came|got)|i (?:started|turned)|lunch)|after (?:work|supper|dinner|tea|hours|you|school)|on my own|while (?:that|the|it|you|i|we|waiting)\b[^.]{0,40}|at lunch(?:time)?|in the meantime|since (?:last|then|you|we)[^.]{0,20}|between (?:then|times)|in (?:january|february|march|april|may|june|july|august|september|october|november|december)|(?:a |the )?(?:couple|few|two|three|four|month|week|day|year)(?: (?:of|or so|or two))?(?: (?:days|nights|weeks|evenings|months))? (?:ago|back)|a while (?:ago|back)|over the (?:holidays?|weekend|winter|break)|at noon|the (?:day|week) before|earlier (?:in the week|today|on|this week)|same (?:time|day|way)|over (?:lunch|supper)|by lamplight|after dark)`
const TOLD = [
  new RegExp(String.raw`\b(?:i|we|i've|we've|i'd|we'd|he|she|they|i just|that|it|was|were|me and \w+|\w+ and (?:i|me))\s+(?:\w+\s+){0,3}?${DONE}\b[^.?!]{0,70}?\b${WHEN}`),
  new RegExp(String.raw`\b(?:went|gone|goes) (?:on|in|together|up)\b[^.?!]{0,20}?\b${WHEN}`),
  new RegExp(String.raw`\b${WHEN}[,\s]+(?:[\w']+[,\s]+){0,4}?(?:i|we|i've|we've|i'd|we'd)\s+(?:\w+\s+){0,2}?${DONE}\b`),
  new RegExp(String.raw`\b(?:i|we)(?:'ve| have)? (?:went ahead and|gone ahead and|went and|gone and|already)\s+(?:\w+\s+){0,1}?${DONE}\b`),
  new RegExp(String.raw`\b(?:were|was|are|is|got|been|had them|has been|have been) (?:all |already |both )?${DONE}\b[^.?!]{0,50}?\b(?:last night|yesterday|the night before|earlier in the week|the other (?:day|night)|during the week|in the evenings?|in the week|before you (?:came|got))`),
  new RegExp(String.raw`\b(?:i|we)(?: have|'ve) (?:\w+ )?${DONE} and (?:\w+ )?${DONE}\b`),
  new RegExp(String.raw`\b(?:is|are|was|were|it's|they're|that's) ${DONE}\b[^.?!]{0,45}?\balready\b`),
  /\b(?:that|this|those|these|they) (?:is|are|was|were) from (?:last (?:night|week|weekend)|yesterday|(?:mon|tues|wednes|thurs|fri|satur|sun)day|this morning)\b/,
  /\b(?:is|are) (?:on|in|done|finished|glued|made) (?:too|already|as well)\b/,
  /\b(?:i|we) spent (?:an?|the|two|three|most|all|about|\w+)\b[^.?!]{0,30}?\b(?:evenings?|nights?|days?|week|weekend|hours?|morning|afternoon)\b/,
  /\b(?:it'?s|they'?ve|that'?s|has|have|they'?re) been (?:all )?\w+ed and \w+ed\b/,
  /\b(?:i|we) did (?:the )?(?:other|same|rest|others|second|port|starboard|left|right|opposite|inside|outside|first|last)\b[^.?!]{0,60}?\b(?:the same(?: way)?|already|earlier|yesterday|last|while|before|on my own|myself|off|same)\b/,
  /\b(?:other|port|starboard|second|rest of the|remaining|last|first) (?:\w+ ){0,2}?(?:i did|we did|got done|was done|were done|is done|are done|went on|went in|has been done)\b[^.?!]{0,40}?\b(?:the same(?: way)?|already|earlier|yesterday|last night|while|before|on my own|myself|same)\b/,
]
/** What was filmed and shown before is not missing. */
const SHOWN = /\byou (?:saw|watched|were (?:here|there)|remember|will have seen|'?ve seen|have seen)\b|\bas you saw\b|\blast (?:episode|video)\b|\bin the last (?:one|video|episode)\b/

/** The same, said in the next cue. */
const WERE_THERE = /\byou were (?:there|here|with me)\b|\bthank you to me\b/

const NEAR_MS = 14_000

/**
 * Finds what was told but not shown, once for each place: "off camera", "I went ahead and", "while the camera was
 * charging". Captions break sentences anywhere, so three cues are read as one, and the place is the cue in which
 * the words start.
 */
export function hearTold(clips: readonly SpokenClip[]): ToldPlace[] {
  const places: ToldPlace[] = []
  let lastSeen = 0
  clips.forEach((clip, at) => {
    const cues = evenCues(clip.cues).map(cue => ({ ...cue, plain: cue.text.replace(/[[(♪][^\])♪]*[\])♪]|<[^>]*>/g, ' ').replace(/\s+/g, ' ').trim().toLowerCase().replaceAll('’', '\'') })).filter(cue => cue.plain)
    cues.forEach((cue, i) => {
      const texts = [cue.plain, cues[i + 1]?.plain ?? '', cues[i + 2]?.plain ?? '']
      // A pause parts one thought from the next.
      if (cues[i + 1] && cues[i + 1]!.startMs - cue.endMs > 4000) texts.splice(1)
      else if (cues[i + 2] && cues[i + 2]!.startMs - cues[i + 1]!.endMs > 4000) texts.splice(2)
      const text = texts.join(' ')
      const within = (match: RegExpExecArray | null) => match !== null && match.index < cue.plain.length
      const shown = SHOWN.test(cue.plain) || WERE_THERE.test(texts.slice(0, 2).join(' '))
      const outright = OUTRIGHT.some(pattern => within(pattern.exec(text)))
      const told = !shown && TOLD.some(pattern => within(pattern.exec(text)))
      if (!outright && !told) return
      const last = places.at(-1)
      if (last && last.clip === at && cue.startMs - lastSeen < NEAR_MS) {
        lastSeen = cue.startMs
        return
      }
      lastSeen = cue.startMs
      places.push({ clip: at, atMs: cue.startMs, words: text.slice(0, 160) })
    })
  })
  return places
}
