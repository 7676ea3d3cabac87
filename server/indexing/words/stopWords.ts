/**
 * Words left out of the index and of questions: grammar and the small change of talking to a camera.
 * Words that shop talk needs stay in: "up", "off", "out", "dry", "down", "over", "back", "both".
 */
const WORDS = `a about after again all also am an and any are as at be because been before being but by can could
did do does doing don for from get gets getting go goes going gonna got had has have having he her here him his how i if in
into is isn it its just kind let like ll me more most my myself no not now of okay ok on one only or other our
ours really right said say see she should so some sort such than that the their them then there these they thing things this
those to too um uh us ve very want was we well were what when where which while who whom whose why will with would yeah yes you your
yours m re s t d doesn isn wasn aren weren hasn haven hadn won wouldn couldn shouldn didn ain needn show shown shows find tell please explain make makes made use used uses using bit little lot`
export const STOP_WORDS: ReadonlySet<string> = new Set(WORDS.split(/\s+/))
