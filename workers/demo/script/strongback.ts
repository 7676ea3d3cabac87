import type { SessionScript } from '../types'
import { benchPhone, ivosPhone } from './cameras'

/** Second session: the skeleton stands up; two cameras run at once while it is lined up. */
export const strongback: SessionScript = {
  date: '2026-09-12',
  place: 'The apple store, Nether Quill',
  temperatureC: 15,
  humidityPct: 71,
  notes: 'Ivo came to help and ran his phone from the bow. After frame stood 1/4 in out of line: shim under the starboard leg. Hot water on the forward ends of the chine logs. Cold shop, so slow to cure.',
  stepNumbers: [1, 9, 10, 11, 12, 13],
  clips: [
    {
      file: 'VID_20260912_094105.mp4',
      captions: 'VID_20260912_094105.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-12T09:41:05+01:00',
      beats: [
        {
          chapter: { step: null, operation: 'none', parts: [], state: 'inked' },
          lines: [
            { text: 'Hello again. Ivo is here, to hold the other end of everything.', shot: 'strongback-wide' },
            { text: 'Morning. I was promised cake.', speaker: 'ivo', pauseMs: 1000 },
          ],
        },
        {
          chapter: { step: 1, operation: 'plan-talk', parts: ['strongback'], state: 'inked' },
          lines: [
            { text: 'This is the strongback. I built it on Thursday, on my own, so you missed that.' },
            { text: 'It is level both ways, and it is bolted to the floor.', pauseMs: 1200, sound: 'knock' },
          ],
        },
        {
          chapter: { step: 9, operation: 'fasten', parts: ['forward frame', 'middle frame', 'after frame', 'bow transom', 'stern transom', 'strongback'], state: 'inked', note: 'Stations 43 1/4, 76 3/4 and 110 1/4 in from the bow mark.' },
          lines: [
            { text: 'She is built upside down, so each frame stands on its legs, bottom in the air.', shot: 'stand-frames' },
            { text: 'Forward frame at 43 1/4, middle at 76 3/4, after frame at 110 1/4.', pauseMs: 1800, sound: 'knock' },
            { text: 'Each leg gets a clamp, and then a screw once I like it.', pauseMs: 2200, sound: 'drill' },
            { text: 'Then the transoms, leaning on their posts, bow that end and stern this end.', shot: 'stand-transoms', pauseMs: 2600, sound: 'drill' },
          ],
        },
        {
          chapter: { step: 10, operation: 'dry-fit', parts: ['forward frame', 'middle frame', 'after frame'], state: 'inked', note: 'Diagonals within 1/16 in.' },
          lines: [
            { text: 'A string goes down the middle, from one transom centre line to the other.', shot: 'sight-string', pauseMs: 1000 },
            { text: 'Ivo, come left. A bit more.', pauseMs: 1300, sound: 'knock' },
            { text: 'That is it, she is on the line.', speaker: 'ivo', pauseMs: 900 },
            { text: 'The after frame was 1/4 out, so it has a shim under the starboard leg.', pauseMs: 1500, sound: 'knock' },
            { text: 'Level across the middle frame. The bubble says yes.', shot: 'level-frame', pauseMs: 1800 },
            { text: 'Diagonals, 81 7/8 both ways. Within a 1/16, I will take that.', pauseMs: 1400 },
          ],
        },
        {
          chapter: { step: 10, operation: 'fasten', parts: ['brace'], state: 'inked' },
          lines: [
            { text: 'Braces on, 2 screws at each end.', shot: 'braces', pauseMs: 3000, sound: 'drill' },
            { text: 'And now nobody lean on it.', pauseMs: 1200 },
          ],
        },
      ],
    },
    {
      file: 'VID_20260912_094145.mp4',
      captions: 'VID_20260912_094145.en.vtt',
      camera: ivosPhone,
      recordedAt: '2026-09-12T09:41:45+01:00',
      hears: 'VID_20260912_094105.mp4',
      fromMs: 40_000,
      lengthMs: 44_000,
      shots: [{ atMs: 0, shot: 'portrait-bow' }, { atMs: 14_000, shot: 'portrait-frame' }],
    },
    {
      file: 'VID_20260912_112636.mp4',
      captions: 'VID_20260912_112636.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-12T11:26:36+01:00',
      beats: [
        {
          chapter: { step: 11, operation: 'dry-fit', parts: ['chine log', 'bow transom', 'forward frame'], state: 'inked', note: 'Forward notch eased by two cuts of the chisel.' },
          lines: [
            { text: 'Chine logs next. Douglas fir, 1 1/8 square, with a foot to spare.', shot: 'chine-spring' },
            { text: 'Start in the notch at the bow transom, and walk it round the frames.', pauseMs: 2400, sound: 'knock' },
            { text: 'It did not like the twist forward, so that end had hot water for 10 minutes.', pauseMs: 900 },
            { text: 'Clamped at every frame, no glue yet. Now look along it for flats.', shot: 'chine-sight', pauseMs: 1200 },
            { text: 'There is one, by the forward frame.', speaker: 'ivo', pauseMs: 600 },
            { text: 'He is right. The notch is shallow. Two cuts with the chisel.', pauseMs: 2000, sound: 'knock' },
          ],
        },
        {
          chapter: { step: 12, operation: 'glue', parts: ['chine log'], state: 'inked' },
          lines: [
            { text: 'Off again. Seal the notches, and then thickened epoxy in each one.', shot: 'chine-glue', pauseMs: 2600, sound: 'brush' },
            { text: 'Mind your eyes, resin flicks off the brush when you work overhead.', pauseMs: 900 },
          ],
        },
        {
          chapter: { step: 12, operation: 'fasten', parts: ['chine log', 'bow transom', 'stern transom'], state: 'inked', note: '1 1/2 in number 8 bronze.' },
          lines: [
            { text: 'One 1 1/2 inch number 8 bronze screw at every frame, and 2 at each transom.', shot: 'chine-screw', pauseMs: 2800, sound: 'drill' },
            { text: 'Drill first, or the end of the log will split.', pauseMs: 1600, sound: 'drill' },
          ],
        },
        {
          chapter: { step: 13, operation: 'sand-fair', parts: ['chine log'], state: 'pencilled' },
          lines: [
            { text: 'Last thing, the bevel. Plane until the straight edge lies flat from chine to chine.', shot: 'chine-bevel', pauseMs: 3600, sound: 'plane' },
            { text: 'Port side I will finish in the week.', pauseMs: 1500, sound: 'plane' },
          ],
        },
        { chapter: null, lines: [{ text: 'Right. Where is that cake?', speaker: 'ivo', pauseMs: 1200 }] },
      ],
    },
  ],
}
