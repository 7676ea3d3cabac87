import { createHash } from 'node:crypto'
import { mkdirSync } from 'node:fs'
import { access, open, readFile, rename, rm, stat, truncate, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { execa } from 'execa'

/*
 * Clips for tests, made by ffmpeg when first asked for and kept between runs. Good ones and every kind of bad one.
 */

/** Change when a recipe below changes. */
const EDITION = 1
const FOLDER = join(process.env.RIBBAND_TEST_CLIPS || join(tmpdir(), `ribband-test-clips-${process.getuid?.() ?? 0}`), `edition-${EDITION}`)

const SHORT_GOP = ['-c:v', 'libx264', '-preset', 'ultrafast', '-tune', 'zerolatency', '-bf', '0', '-pix_fmt', 'yuv420p', '-g', '15', '-keyint_min', '15', '-sc_threshold', '0']
const AAC = ['-c:a', 'aac', '-b:a', '64k']
const FAST = ['-movflags', '+faststart']
const bars = (seconds: number, size = '320x180', rate = '30') => ['-f', 'lavfi', '-i', `testsrc2=s=${size}:r=${rate}:d=${seconds}`]
const tone = (seconds: number) => ['-f', 'lavfi', '-i', `sine=f=330:r=48000:d=${seconds}`]

/**
 * Frame n as a picture: 16 columns of white or black that spell n in binary, highest bit left, on 320 × 180. A tile's
 * content then proves which frame it shows.
 */
function numbered(frames: number, rate: string): string[] {
  return ['-f', 'lavfi', '-i', `color=c=black:s=16x2:r=${rate}:d=10000,format=gray,geq=lum='255*mod(floor(N/pow(2\\,15-X))\\,2)',scale=320:180:flags=neighbor,setsar=1`, '-frames:v', String(frames)]
}

/** A recipe writes a file, by arguments for ffmpeg or by code. */
type Recipe = { ext: string, args: string[] } | { ext: string, write: (path: string) => Promise<void> }

const encoded = (ext: string, ...args: string[][]): Recipe => ({ ext, args: args.flat() })

const RECIPES = {
  /** What a phone writes at best: plays everywhere as it is. 4 s, 320 × 180, keyframe every half second, sound. */
  'good': encoded('mp4', bars(4), tone(4), SHORT_GOP, AAC, FAST, ['-metadata', 'creation_time=2024-05-11T14:03:20Z']),
  /** The same with its index at the end, as cameras write it. */
  'index-last': encoded('mp4', bars(4), tone(4), SHORT_GOP, AAC),
  /** 24 s, frames carry their number; a keyframe every second, B-frames in between. */
  'numbered': encoded('mp4', numbered(720, '30'), ['-c:v', 'libx264', '-preset', 'veryfast', '-crf', '12', '-bf', '3', '-pix_fmt', 'yuv420p', '-g', '30', '-keyint_min', '30', '-sc_threshold', '0'], FAST),
  /** The same with keyframes 250 frames apart and 30000/1001 frames a second. */
  'numbered-long-gop': encoded('mp4', numbered(720, '30000/1001'), ['-c:v', 'libx264', '-preset', 'veryfast', '-crf', '12', '-bf', '3', '-pix_fmt', 'yuv420p', '-g', '250', '-keyint_min', '250', '-sc_threshold', '0'], FAST),
  /** Keyframes only, as some cameras write. */
  'numbered-keyframes-only': encoded('mov', numbered(360, '30'), ['-c:v', 'mjpeg', '-q:v', '2', '-pix_fmt', 'yuvj420p']),
  /** Held upright: stored lying, with a note to turn it by 90° clockwise. Top half as shown is red. */
  'rotated': {
    ext: 'mp4',
    async write(path) {
      const lying = `${path}.lying.mp4`
      await ffmpeg(['-f', 'lavfi', '-i', 'color=c=red:s=160x180:r=30:d=3', '-f', 'lavfi', '-i', 'color=c=blue:s=160x180:r=30:d=3', '-filter_complex', '[0][1]hstack', ...SHORT_GOP, '-f', 'mp4', lying])
      await ffmpeg(['-i', lying, '-c', 'copy', '-metadata:s:v', 'rotate=270', ...FAST, '-f', 'mp4', path])
      await rm(lying)
    },
  },
  /** Every third frame missing in the middle. */
  'variable-rate': encoded('mp4', ['-f', 'lavfi', '-i', `testsrc2=s=320x180:r=30:d=6,select='not(between(n\\,40\\,120)*not(mod(n\\,3)))'`], tone(6), ['-fps_mode', 'vfr'], SHORT_GOP, AAC, FAST),
  /** Begins 5 s late on the container's clock. */
  'late-start': encoded('mkv', bars(3), tone(3), SHORT_GOP, AAC, ['-output_ts_offset', '5']),
  /** An MP4 whose edit list hides its first second and a half: copied from the middle of a GOP. */
  'edit-list': {
    ext: 'mp4',
    async write(path) {
      const whole = `${path}.whole.mp4`
      await ffmpeg([...bars(6), ...tone(6), ...SHORT_GOP, '-g', '60', '-keyint_min', '60', ...AAC, '-f', 'mp4', whole])
      await ffmpeg(['-ss', '1.5', '-i', whole, '-c', 'copy', ...FAST, '-f', 'mp4', path])
      await rm(whole)
    },
  },
  'hevc': encoded('mp4', bars(2), tone(2), ['-c:v', 'libx265', '-preset', 'ultrafast', '-x265-params', 'log-level=none', '-tag:v', 'hvc1', '-pix_fmt', 'yuv420p'], AAC, FAST),
  'ten-bit': encoded('mp4', bars(2), ['-c:v', 'libx264', '-preset', 'ultrafast', '-pix_fmt', 'yuv420p10le', '-g', '15'], FAST),
  /** High dynamic range as phones write it (HLG). */
  'hdr': encoded('mp4', bars(2), ['-c:v', 'libx265', '-preset', 'ultrafast', '-x265-params', 'log-level=none:colorprim=bt2020:transfer=arib-std-b67:colormatrix=bt2020nc', '-tag:v', 'hvc1', '-pix_fmt', 'yuv420p10le', '-color_primaries', 'bt2020', '-color_trc', 'arib-std-b67', '-colorspace', 'bt2020nc'], FAST),
  'matroska': encoded('mkv', bars(3), tone(3), SHORT_GOP, AAC),
  'webm': encoded('webm', bars(2, '160x90'), tone(2), ['-c:v', 'libvpx', '-deadline', 'realtime', '-cpu-used', '8', '-g', '15', '-c:a', 'libopus']),
  'old-avi': encoded('avi', bars(3), tone(3), ['-c:v', 'mpeg4', '-bf', '2', '-g', '30', '-c:a', 'libmp3lame']),
  'camcorder': encoded('ts', bars(3), tone(3), SHORT_GOP, ['-c:a', 'mp2']),
  'long-gop': encoded('mp4', bars(8), tone(8), ['-c:v', 'libx264', '-preset', 'ultrafast', '-pix_fmt', 'yuv420p', '-g', '250', '-keyint_min', '250', '-sc_threshold', '0'], AAC, FAST),
  'silent': encoded('mp4', bars(2), SHORT_GOP, FAST),
  'audio-only': encoded('mp4', tone(3), AAC, FAST),
  /** Sound with a cover picture, which must not be taken for a film. */
  'cover-art': {
    ext: 'mp3',
    async write(path) {
      const cover = `${path}.cover.png`
      await ffmpeg(['-f', 'lavfi', '-i', 'color=c=teal:s=200x200:d=1', '-frames:v', '1', cover])
      await ffmpeg([...tone(3), '-i', cover, '-map', '0', '-map', '1', '-c:v', 'copy', '-c:a', 'libmp3lame', '-id3v2_version', '3', '-disposition:v', 'attached_pic', '-f', 'mp3', path])
      await rm(cover)
    },
  },
  'with-subtitles': {
    ext: 'mp4',
    async write(path) {
      const subtitles = `${path}.srt`
      await writeFile(subtitles, '1\n00:00:00,500 --> 00:00:01,500\nScarf the chine log.\n\n2\n00:00:02,000 --> 00:00:03,250\nThen a seal coat.\n')
      await ffmpeg([...bars(4), ...tone(4), '-i', subtitles, ...SHORT_GOP, ...AAC, '-c:s', 'mov_text', '-metadata:s:s:0', 'language=eng', ...FAST, '-f', 'mp4', path])
      await rm(subtitles)
    },
  },
  /** Three scenes of even colour, cut at 4.3 s and 9.1 s. */
  'three-scenes': encoded('mp4',
    ['-f', 'lavfi', '-i', 'testsrc2=s=320x180:r=30:d=4.3', '-f', 'lavfi', '-i', 'gradients=s=320x180:r=30:d=4.8:c0=0x7a5230:c1=0xd8c8a0:nb_colors=2:speed=0.02', '-f', 'lavfi', '-i', 'smptebars=s=320x180:r=30:d=6', '-filter_complex', '[0]setsar=1[a];[1]format=yuv420p,setsar=1[b];[2]setsar=1[c];[a][b][c]concat=n=3'],
    SHORT_GOP, ['-g', '30', '-keyint_min', '30'], FAST),
  /** A tone with gaps at 2.0–3.2 s and 5.0–6.5 s over hum of −34 dB, far above an absolute −45 dB. */
  'speech-over-hum': encoded('m4a', ['-f', 'lavfi', '-i', `aevalsrc='0.03*sin(2*PI*100*t)+if(between(t\\,2\\,3.2)+between(t\\,5\\,6.5)\\,0\\,0.35*sin(2*PI*300*t))':s=48000:d=9`], AAC, FAST, ['-f', 'mp4']),

  'empty': { ext: 'mp4', write: path => writeFile(path, '') },
  'text': { ext: 'mp4', write: path => writeFile(path, 'Cut list for the transom\n12 mm ply, 1220 x 400\n'.repeat(40)) },
  'zeros': { ext: 'mp4', write: path => writeFile(path, Buffer.alloc(65_536)) },
  'random-bytes': { ext: 'mp4', write: path => writeFile(path, scrambled(200_000)) },
  /** A recording that was interrupted: media data, but the index was never written. */
  'no-index': { ext: 'mp4', write: path => shortened('index-last', path, 0.6) },
  /** A copy that was broken off: the index in front promises more than is there. */
  'cut-off': { ext: 'mp4', write: path => shortened('good', path, 0.6) },
  'cut-off-matroska': { ext: 'mkv', write: path => shortened('matroska', path, 0.4) },
  /** Whole boxes, but the pictures in them are noise. */
  'scrambled-pictures': { ext: 'mp4', write: path => scramble('silent', path) },
  'playlist-file': { ext: 'mp4', write: path => writeFile(path, '#EXTM3U\n#EXT-X-TARGETDURATION:5\n#EXTINF:5,\nfile:///etc/passwd\n#EXT-X-ENDLIST\n') },
  'playlist-http': { ext: 'mp4', write: path => writeFile(path, '#EXTM3U\n#EXT-X-TARGETDURATION:5\n#EXTINF:5,\nhttp://127.0.0.1:9/secret.ts\n#EXT-X-ENDLIST\n') },
  'concat-list': { ext: 'mp4', write: path => writeFile(path, 'ffconcat version 1.0\nfile \'/etc/passwd\'\n') },
  'concat-list-plain': { ext: 'mp4', write: path => writeFile(path, 'file http://127.0.0.1:9/a.mp4\nfile /etc/hosts\n') },
  'dash-manifest': { ext: 'mp4', write: path => writeFile(path, '<?xml version="1.0"?>\n<MPD xmlns="urn:mpeg:dash:schema:mpd:2011"><BaseURL>http://127.0.0.1:9/</BaseURL></MPD>') },
  'picture-named-mp4': encoded('mp4', ['-f', 'lavfi', '-i', 'color=c=teal:s=300x300:d=1', '-frames:v', '1', '-c:v', 'png', '-f', 'image2', '-update', '1']),
  /** Claims 100,000 tracks: the one real track box, copied that often. */
  'many-streams': { ext: 'mp4', write: path => manyTracks('silent', path, 100_000) },
  /** Claims a picture of 65,535 × 65,535. */
  'absurd-size': { ext: 'mp4', write: path => absurdSize('silent', path) },
} satisfies Record<string, Recipe>

export type ClipKind = keyof typeof RECIPES
export const CLIP_KINDS = Object.keys(RECIPES) as ClipKind[]

const underWay = new Map<ClipKind, Promise<string>>()

/** Absolute path of a clip of this kind. Made once; treat it as read-only and copy it to change it. */
export function makeClip(kind: ClipKind): Promise<string> {
  let made = underWay.get(kind)
  if (!made) {
    made = make(kind)
    underWay.set(kind, made)
  }
  return made
}

async function make(kind: ClipKind): Promise<string> {
  const recipe: Recipe = RECIPES[kind]
  mkdirSync(FOLDER, { recursive: true })
  const path = join(FOLDER, `${kind}.${recipe.ext}`)
  if (await access(path).then(() => true, () => false)) return path
  // Several test processes may make the same clip at once; the last one to finish replaces an equal file.
  const draft = join(FOLDER, `draft-${process.pid}-${kind}.${recipe.ext}`)
  if ('write' in recipe) await recipe.write(draft)
  else await ffmpeg([...recipe.args, draft])
  await rename(draft, path)
  return path
}

async function ffmpeg(args: string[]): Promise<void> {
  await execa('ffmpeg', ['-nostdin', '-v', 'error', '-y', ...args])
}

/** Good clips that bad ones are made from. */
type Whole = 'good' | 'index-last' | 'silent' | 'matroska'

/** Bytes that look random but are the same on every machine. */
function scrambled(length: number): Buffer {
  const blocks: Buffer[] = []
  for (let i = 0; i * 32 < length; i++) blocks.push(createHash('sha256').update(`ribband ${i}`).digest())
  return Buffer.concat(blocks).subarray(0, length)
}

async function shortened(kind: Whole, path: string, share: number): Promise<void> {
  await writeFile(path, await readFile(await makeClip(kind)))
  await truncate(path, Math.round((await stat(path)).size * share))
}

async function scramble(kind: Whole, path: string): Promise<void> {
  const data = await readFile(await makeClip(kind))
  const media = data.indexOf('mdat') + 4
  scrambled(data.length - media).copy(data, media)
  await writeFile(path, data)
}

async function manyTracks(kind: Whole, path: string, count: number): Promise<void> {
  const data = await readFile(await makeClip(kind))
  const moov = data.indexOf('moov') - 4
  const moovEnd = moov + data.readUInt32BE(moov)
  const trak = data.indexOf('trak', moov) - 4
  const track = data.subarray(trak, trak + data.readUInt32BE(trak))
  const file = await open(path, 'w')
  try {
    const head = Buffer.from(data.subarray(0, moovEnd))
    head.writeUInt32BE(moovEnd - moov + track.length * count, moov)
    await file.write(head)
    const thousand = Buffer.concat(Array.from({ length: 1000 }, () => track))
    for (let n = 0; n < count / 1000; n++) await file.write(thousand)
    await file.write(data.subarray(moovEnd))
  }
  finally {
    await file.close()
  }
}

async function absurdSize(kind: Whole, path: string): Promise<void> {
  const data = Buffer.from(await readFile(await makeClip(kind)))
  // VisualSampleEntry: 4 type, 6 reserved, 2 reference index, 16 predefined and reserved, then width and height.
  const entry = data.indexOf('avc1', data.indexOf('stsd'))
  data.writeUInt16BE(65_535, entry + 28)
  data.writeUInt16BE(65_535, entry + 30)
  // The stream's own parameters would correct the claim, so they are made unreadable.
  const parameters = data.indexOf('avcC', entry)
  data.write('xxxx', parameters, 'latin1')
  await writeFile(path, data)
}
