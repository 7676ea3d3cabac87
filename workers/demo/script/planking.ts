import type { SessionScript } from '../types'
import { benchPhone } from './cameras'

/** Third session: sides and bottom, after which she looks like a boat. */
export const planking: SessionScript = {
  date: '2026-09-27',
  place: 'The apple store, Nether Quill',
  temperatureC: 19,
  humidityPct: 55,
  notes: 'Both sides and the bottom on in one long day. Split one screw hole at the bow, filled. Port side not filmed. 1.9 kg of epoxy in six batches.',
  toReview: true,
  stepNumbers: [14, 15, 16, 17, 18, 19],
  clips: [
    {
      file: 'VID_20260927_091240.mp4',
      captions: 'VID_20260927_091240.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-27T09:12:40+01:00',
      beats: [
        {
          chapter: null,
          lines: [
            { text: 'Good morning. Sun in the window, so a good day for glue.', shot: 'skeleton-morning', pauseMs: 900 },
          ],
        },
        {
          chapter: { step: 14, operation: 'plan-talk', parts: ['side panel'], state: 'inked' },
          lines: [
            { text: 'I scarfed the side sheets on Wednesday evening, 8 to 1, and nobody saw that but the cat.', pauseMs: 1000 },
          ],
        },
        {
          chapter: { step: 15, operation: 'mark-out', parts: ['side panel'], state: 'inked', note: 'Scribed from inside; sheer taken with a batten through the frame marks.' },
          lines: [
            { text: 'The starboard side goes on as a plain sheet, too big all round.', shot: 'side-wrap', sound: 'knock' },
            { text: '6 mm ply takes the bend easily, it only argues at the bow.', pauseMs: 2000, sound: 'knock' },
            { text: 'Now I scribe from the inside, along the chine log and both transoms.', shot: 'side-scribe', pauseMs: 2200, sound: 'pencil' },
            { text: 'And a batten through the frame marks gives me the sheer.', pauseMs: 1800, sound: 'pencil' },
          ],
        },
        {
          chapter: { step: 15, operation: 'cut', parts: ['side panel'], state: 'inked' },
          lines: [
            { text: 'Back on the trestles, both sheets together, good faces in.', shot: 'side-cut' },
            { text: 'I cut 1/4 full. Ears and eyes again, and a mask, this ply is dusty.', pauseMs: 4400, sound: 'saw' },
            { text: 'Two sides from one cut, so they have to match.', pauseMs: 1500 },
          ],
        },
      ],
    },
    {
      file: 'VID_20260927_104533.mp4',
      captions: 'VID_20260927_104533.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-27T10:45:33+01:00',
      beats: [
        {
          chapter: { step: 16, operation: 'seal-coat', parts: ['side panel', 'chine log', 'bow transom', 'stern transom'], state: 'inked' },
          lines: [
            { text: 'Starboard side, and for good this time.', shot: 'side-seal' },
            { text: 'All that touches gets a seal coat: chine log, frames, and the edges of both transoms.', pauseMs: 2400, sound: 'brush' },
          ],
        },
        {
          chapter: { step: 16, operation: 'glue', parts: ['side panel', 'chine log'], state: 'inked', note: '19 °C, about 20 minutes open.' },
          lines: [
            { text: 'Then thickened epoxy, combed along the log with a notched stick.', shot: 'side-glue', pauseMs: 2400, sound: 'brush' },
            { text: 'At 19 degrees it moves faster, I count on 20 minutes.' },
            { text: 'Ivo has the stern, I have the bow, and we meet the middle frame first.', shot: 'side-on', pauseMs: 1800, sound: 'knock' },
            { text: 'Clamps along the sheer, softly.', pauseMs: 1600, sound: 'knock' },
          ],
        },
        {
          chapter: { step: 16, operation: 'fasten', parts: ['side panel', 'chine log'], state: 'inked', note: '3/4 in number 6 bronze, 4 in apart.' },
          lines: [
            { text: 'Screws along the chine, 3/4 inch number 6 bronze, 4 inches apart.', shot: 'side-screws', pauseMs: 2400, sound: 'drill' },
            { text: 'Start amidships and work towards both ends, so the panel can creep.', pauseMs: 2000, sound: 'drill' },
            { text: 'I split one at the bow, because I was too lazy to drill it.', pauseMs: 1300 },
          ],
        },
        {
          chapter: null,
          lines: [
            { text: 'The port side went on after lunch, just the same.', shot: 'both-sides' },
            { text: 'My hands were all glue, so there is no film of it.', pauseMs: 1500 },
          ],
        },
      ],
    },
    {
      file: 'VID_20260927_161208.mp4',
      captions: 'VID_20260927_161208.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-27T16:12:08+01:00',
      beats: [
        {
          chapter: { step: 18, operation: 'sand-fair', parts: ['side panel', 'chine log'], state: 'inked' },
          lines: [
            { text: 'Both sides are on, so the edges come down flat for the bottom.', shot: 'edge-plane', pauseMs: 1800, sound: 'plane' },
            { text: 'Hold the long plane across both chines, and it cuts only the high places.', pauseMs: 3000, sound: 'plane' },
          ],
        },
        {
          chapter: { step: 19, operation: 'dry-fit', parts: ['bottom panel'], state: 'inked' },
          lines: [
            { text: 'The bottom panel is 9 mm, and an inch too big all round.', shot: 'bottom-drop', pauseMs: 1000, sound: 'knock' },
            { text: 'Down dry, draw round it from underneath, and off again.', pauseMs: 1800, sound: 'pencil' },
          ],
        },
        {
          chapter: { step: 19, operation: 'glue', parts: ['bottom panel', 'chine log'], state: 'inked' },
          lines: [
            { text: 'Seal coat, and then a fat line of thickened epoxy on both chine logs and across the transoms.', shot: 'bottom-glue', pauseMs: 2600, sound: 'brush' },
            { text: 'Two pots for this, mixed 5 minutes apart, so neither cooks off on us.', pauseMs: 900 },
          ],
        },
        {
          chapter: { step: 19, operation: 'fasten', parts: ['bottom panel', 'chine log'], state: 'inked', note: '1 in bronze ring nails, 3 in apart.' },
          lines: [
            { text: 'Bottom on, lined up on the centre line, one nail at each end to hold it.', shot: 'bottom-nails', pauseMs: 1500, sound: 'hammer' },
            { text: '1 inch bronze ring nails, 3 inches apart, from the middle outwards.', pauseMs: 3600, sound: 'hammer' },
          ],
        },
        {
          chapter: { step: 19, operation: 'clean-up', parts: ['bottom panel'], state: 'pencilled' },
          lines: [
            { text: 'The drips inside we scrape from below, lying on the floor with a stick.', shot: 'under-hull', pauseMs: 1600, sound: 'brush' },
          ],
        },
        {
          chapter: null,
          lines: [
            { text: 'And there she is, the right shape, and the wrong way up.', shot: 'hull-hero' },
            { text: 'Thank you for watching, and mind your fingers.', pauseMs: 1500 },
          ],
        },
      ],
    },
  ],
}
