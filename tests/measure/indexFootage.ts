import { execa } from 'execa'
import { mkdirSync, readFileSync } from 'node:fs'
import { access, mkdtemp, rename, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { indexFootage, type LocalFootage } from '../../workers/media/ffmpeg/indexFootage'
import { probeClip } from '../../workers/media/ffmpeg/probe'

/*
 * Worker time of indexFootage against one bare decode (`ffmpeg -i FILE -f null -`) of the same file in the same run:
 * ten minutes of 1080p30 H.264 at 12 Mb/s with speech-like sound, keyframes every 30 and every 250 frames. User and
 * system time of all processes, this one included. Run: `node --import tsx tests/measure/indexFootage.ts`
 */

const FOLDER = process.env.RIBBAND_MEASURE_CLIPS || join(tmpdir(), `ribband-measure-clips-${process.getuid?.() ?? 0}`)
const SIZE = '1920x1080'

/** Scenes of the repeated minute: seconds, source, grain. Grain makes the encoder need its 12 Mb/s, as a real lens does. */
const SCENES: [number, string, number][] = [
  [7, `testsrc2=s=${SIZE}:r=30`, 8],
  [11, `gradients=s=${SIZE}:r=30:c0=0x7a5230:c1=0xd8c8a0:nb_colors=2:speed=0.01`, 14],
  [9, `smptehdbars=s=${SIZE}:r=30`, 10],
  [12, 'life=s=480x270:mold=10:r=30:ratio=0.2:death_color=0x553311:life_color=0xccddaa', 4],
  [8, `gradients=s=${SIZE}:r=30:c0=0x203040:c1=0x90a0b0:nb_colors=2:speed=0.03`, 12],
  [13, 'sierpinski=s=960x540:r=30:type=carpet', 6],
]
const REPEATS = 10
/** A voice: three tones in syllables, in sentences with gaps, over a faint room. */
const SPEECH = '0.003*random(0)+gt(sin(t*0.9)+0.35*sin(t*2.3)\\,-0.5)*0.3*abs(sin(t*9))*(sin(2*PI*140*t)+0.5*sin(2*PI*420*t)+0.3*sin(2*PI*1900*t))/1.8'

export interface IndexRatio {
  keyframeEveryFrames: number
  method: LocalFootage['method']
  bareDecodeCpuS: number
  indexCpuS: number
  ratio: number
  budget: number
  cuts: { real: number, found: number, exact: number, false: number }
}

/** Measures both clips, one after the other; several minutes, most of them for the bare decodes. */
export async function measureIndexFootage(): Promise<IndexRatio[]> {
  return [await measure(30, 0.25), await measure(250, 1.1)]
}

async function measure(gop: number, budget: number): Promise<IndexRatio> {
  const path = await makeLongClip(gop)
  const probe = await probeClip(path)
  const outDir = await mkdtemp(join(tmpdir(), 'ribband-measure-'))
  try {
    const bareDecodeCpuS = await cpuOf(() => execa('ffmpeg', ['-nostdin', '-v', 'error', '-i', path, '-f', 'null', '-']))
    let footage!: LocalFootage
    const indexCpuS = await cpuOf(async () => {
      footage = await indexFootage(path, probe, { outDir })
    })
    const cuts = compareCuts(footage.sceneChangesMs)
    return { keyframeEveryFrames: gop, method: footage.method, bareDecodeCpuS, indexCpuS, ratio: indexCpuS / bareDecodeCpuS, budget, cuts }
  }
  finally {
    await rm(outDir, { recursive: true })
  }
}

/** How many of the clip's cuts were found within 2.2 s and within 0.1 s, and how many were reported that are none. */
function compareCuts(foundMs: number[]) {
  const real: number[] = []
  for (let at = 0, i = 0; i < SCENES.length * REPEATS - 1; i++) real.push((at += SCENES[i % SCENES.length]![0]) * 1000)
  const near = (cut: number, withinMs: number) => foundMs.some(found => Math.abs(found - cut) <= withinMs)
  return {
    real: real.length,
    found: real.filter(cut => near(cut, 2200)).length,
    exact: real.filter(cut => near(cut, 100)).length,
    false: foundMs.filter(found => !real.some(cut => Math.abs(found - cut) <= 2200)).length,
  }
}

/** Seconds of processor time, user and system, that this process and its children spent on a piece of work. */
async function cpuOf(work: () => Promise<unknown>): Promise<number> {
  const before = cpuSeconds()
  await work()
  return cpuSeconds() - before
}

/** proc(5): utime, stime, cutime and cstime are fields 14–17, in hundredths of a second. */
function cpuSeconds(): number {
  const stat = readFileSync('/proc/self/stat', 'latin1')
  return stat.slice(stat.lastIndexOf(')') + 2).split(' ').slice(11, 15).reduce((sum, field) => sum + Number(field), 0) / 100
}

/** Ten minutes: one minute encoded, copied ten times. Kept between runs. */
export async function makeLongClip(gop: number): Promise<string> {
  mkdirSync(FOLDER, { recursive: true })
  const path = join(FOLDER, `ten-minutes-gop-${gop}-2.mp4`)
  if (await access(path).then(() => true, () => false)) return path
  const minute = join(FOLDER, `draft-${process.pid}-minute.mp4`)
  const list = join(FOLDER, `draft-${process.pid}-list.txt`)
  const draft = join(FOLDER, `draft-${process.pid}.mp4`)
  const ffmpeg = (args: string[]) => execa('ffmpeg', ['-nostdin', '-v', 'error', '-y', ...args])
  await ffmpeg([
    ...SCENES.flatMap(([seconds, source]) => ['-f', 'lavfi', '-t', String(seconds), '-i', source]),
    '-filter_complex', `${SCENES.map(([, , grain], i) => `[${i}]scale=${SIZE.replace('x', ':')},format=yuv420p,setsar=1,noise=alls=${grain}:allf=t[s${i}];`).join('')}${SCENES.map((_, i) => `[s${i}]`).join('')}concat=n=${SCENES.length}`,
    '-c:v', 'libx264', '-preset', 'veryfast', '-b:v', '12M', '-maxrate', '14M', '-bufsize', '24M', '-g', String(gop), '-keyint_min', String(gop), '-sc_threshold', '0', minute,
  ])
  await writeFile(list, `file '${minute}'\n`.repeat(REPEATS))
  await ffmpeg([
    '-f', 'concat', '-safe', '0', '-i', list, '-f', 'lavfi', '-i', `aevalsrc='${SPEECH}':s=48000:d=${60 * REPEATS}`,
    '-map', '0:v', '-map', '1:a', '-c:v', 'copy', '-c:a', 'aac', '-b:a', '128k', '-shortest', '-movflags', '+faststart', draft,
  ])
  await rename(draft, path)
  await Promise.all([rm(minute), rm(list)])
  return path
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const ratios = await measureIndexFootage()
  console.log(JSON.stringify(ratios))
  for (const { keyframeEveryFrames, method, ratio, budget } of ratios) {
    console.log(`index-footage, keyframe every ${keyframeEveryFrames} frames (${method}): ${ratio.toFixed(3)} of a bare decode, budget ${budget}`)
  }
}
