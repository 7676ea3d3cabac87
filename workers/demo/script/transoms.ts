import type { SessionScript } from '../types'
import { benchPhone, shelfCamera } from './cameras'

/** First session: both transoms and the start of the frames. */
export const transoms: SessionScript = {
  date: '2026-09-05',
  place: 'The apple store, Nether Quill',
  temperatureC: 17,
  humidityPct: 62,
  notes: 'Bow transom cut, framed and in clamps by noon. Stern transom done over lunch without the camera. One gusset went on the wrong face and came off again while wet. 340 g of epoxy used.',
  stepNumbers: [3, 4, 5, 6, 7, 8],
  clips: [
    {
      file: 'VID_20260905_101502.mp4',
      captions: 'VID_20260905_101502.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-05T10:15:02+01:00',
      beats: [
        {
          chapter: null,
          lines: [
            { text: 'Morning all, and welcome back to the apple store.', shot: 'shop-wide', sound: 'kettle' },
            { text: 'It has stopped raining at last, and the kettle is on.', pauseMs: 900 },
          ],
        },
        {
          chapter: { step: 3, operation: 'plan-talk', parts: ['bow transom', 'stern transom'], state: 'inked' },
          lines: [
            { text: 'Today is the transoms, and the bow transom comes first.', shot: 'drawing-profile' },
            { text: 'Burdock is a pram, so she has a transom at both ends, and the bow one is the smaller.' },
            { text: 'The full size patterns I drew on Tuesday night, with the camera off, sorry.', pauseMs: 1200 },
          ],
        },
        {
          chapter: { step: 3, operation: 'mark-out', parts: ['bow transom'], state: 'inked', note: 'Widths taken square off the centre line, never off the edge of the sheet.' },
          lines: [
            { text: 'So here is the blank, 9 mm marine ply, best face down.', shot: 'bow-mark' },
            { text: 'I strike a centre line first, and square everything off that.', pauseMs: 1800, sound: 'pencil' },
            { text: '26 inches across the top edge, so 13 each side of the line.', pauseMs: 700, sound: 'pencil' },
            { text: 'And 18 1/8 across the bottom.', pauseMs: 900, sound: 'pencil' },
            { text: 'Then I prick through the pattern and join the marks along a straight edge.', pauseMs: 2200, sound: 'pencil' },
          ],
        },
        {
          chapter: { step: 3, operation: 'cut', parts: ['bow transom'], state: 'inked' },
          lines: [
            { text: 'Glasses on, and ear defenders, because the jigsaw is loud in here.', shot: 'bow-saw' },
            { text: 'Stay a full 1/8 outside the line, with the sheet clamped so it cannot chatter.', pauseMs: 4200, sound: 'saw' },
            { text: 'Ah, I wandered there. It is outside the line, so the plane will save me.', pauseMs: 2400, sound: 'saw' },
          ],
        },
        {
          chapter: { step: 3, operation: 'shape', parts: ['bow transom'], state: 'inked' },
          lines: [
            { text: 'Now the block plane, down to the line.', shot: 'bow-plane', pauseMs: 2600, sound: 'plane' },
            { text: 'Work in from both corners, so the face veneer does not break out.', pauseMs: 3000, sound: 'plane' },
            { text: 'The bevels can wait until she is on the strongback.', pauseMs: 1200 },
          ],
        },
      ],
    },
    {
      file: 'VID_20260905_111847.mp4',
      captions: 'VID_20260905_111847.en.vtt',
      camera: benchPhone,
      recordedAt: '2026-09-05T11:18:47+01:00',
      beats: [
        {
          chapter: { step: 4, operation: 'dry-fit', parts: ['bow transom', 'transom cheek'], state: 'inked' },
          lines: [
            { text: 'Right, the bow transom is cut, and these are the cheeks that go round its edge.', shot: 'bow-dry-fit', sound: 'knock' },
            { text: 'They are sapele, 3/4 thick by 1 3/4 wide, and the side panels screw into them later.' },
            { text: 'Everything goes together dry first. No glue anywhere.', pauseMs: 1500, sound: 'knock' },
            { text: 'Then a pencil mark across every joint, so each cheek goes back where it came from.', pauseMs: 1800, sound: 'pencil' },
          ],
        },
        {
          chapter: { step: 4, operation: 'seal-coat', parts: ['bow transom', 'transom cheek'], state: 'inked', note: 'End grain coated twice.' },
          lines: [
            { text: 'Gloves on before the resin comes out, and the door open for air.', shot: 'bow-seal' },
            { text: 'This is plain epoxy with no powder in it, two parts resin to one of hardener.', pauseMs: 1200, sound: 'brush' },
            { text: 'The seal coat goes on both faces, and twice on the end grain, because end grain drinks it.', pauseMs: 2500, sound: 'brush' },
            { text: 'Skip that, and the wood sucks the glue dry and the joint starves.', pauseMs: 1500 },
          ],
        },
        {
          chapter: { step: 4, operation: 'glue', parts: ['bow transom', 'transom cheek'], state: 'inked', note: '2 to 1 epoxy with wood flour, 17 °C, in the clamps overnight.' },
          lines: [
            { text: 'Now the glue. The same mix, stirred for 2 full minutes, scraping the sides of the pot.', shot: 'glue-pot', pauseMs: 2200, sound: 'stir' },
            { text: 'Then wood flour, with a mask on for the powder, until it stands up like peanut butter.', pauseMs: 1800, sound: 'stir' },
            { text: 'At 17 degrees I have about 25 minutes in the pot, so no chatting.' },
            { text: 'Comb it on to the transom, not too thin, and press each cheek down on its marks.', shot: 'bow-spread', pauseMs: 2600, sound: 'brush' },
            { text: '6 clamps, about 5 inches apart, and only snug.', shot: 'bow-clamps', pauseMs: 1500, sound: 'knock' },
            { text: 'You want a small bead squeezing out all along. Too much clamp and you squeeze the joint empty.', pauseMs: 1400 },
          ],
        },
        {
          chapter: { step: 4, operation: 'clean-up', parts: ['bow transom'], state: 'inked' },
          lines: [
            { text: 'Scrape off the squeeze-out with a stick while it is soft.', shot: 'bow-scrape', pauseMs: 2000, sound: 'brush' },
            { text: 'And there it stays until tomorrow morning.', pauseMs: 1300 },
          ],
        },
      ],
    },
    {
      file: 'VID_20260905_150312.mp4',
      captions: 'VID_20260905_150312.en.srt',
      camera: shelfCamera,
      recordedAt: '2026-09-05T15:03:12+01:00',
      beats: [
        {
          chapter: null,
          lines: [
            { text: 'The stern transom is the same job again, only bigger.', shot: 'stern-leaning' },
            { text: 'I cut it and glued its cheeks over lunch, and forgot to film any of it.' },
            { text: '42 1/2 inches across the top, with a notch for the sculling oar.', pauseMs: 1400 },
          ],
        },
        {
          chapter: { step: 7, operation: 'mark-out', parts: ['middle frame'], state: 'inked' },
          lines: [
            { text: 'On to the frames. Each one is a floor across the bottom and a futtock up each side.', shot: 'frame-drawing' },
            { text: 'I set the bevel to the drawing, 12 3/4 degrees of flare on the middle frame.', pauseMs: 1800, sound: 'pencil' },
            { text: 'Leave the legs long, because the frames stand on them upside down.', pauseMs: 1200 },
          ],
        },
        {
          chapter: { step: 8, operation: 'glue', parts: ['middle frame', 'gusset'], state: 'pencilled', note: 'Gusset first glued to the wrong face.' },
          lines: [
            { text: 'A ply gusset goes over each corner, with glue and 3/4 inch ring nails to hold it.', shot: 'frame-gussets', pauseMs: 2600, sound: 'hammer' },
            { text: 'And that one is on the wrong face. Off it comes while the glue is wet.', pauseMs: 1600 },
            { text: 'Check the width at the sheer before it grabs. 50 3/4, good.', pauseMs: 1600, sound: 'hammer' },
          ],
        },
        {
          chapter: null,
          lines: [{ text: 'That is my tea going cold. See you next week.', pauseMs: 1200 }],
        },
      ],
    },
  ],
}
