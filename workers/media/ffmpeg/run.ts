import { availableParallelism } from 'node:os'
import { isAbsolute } from 'node:path'
import { Writable } from 'node:stream'
import type { Readable } from 'node:stream'
import { execa } from 'execa'

/*
 * The one place that starts ffmpeg and ffprobe.
 *
 * execa rather than fluent-ffmpeg: the latter is archived, knows neither abort signals nor timeouts nor extra pipes,
 * and builds command lines that cannot be wrapped by the limits below. execa passes an argument list without a shell.
 *
 * Every call:
 * - reads local files only (`file:` prefix, so that `%d`, `concat:` and `http:` in a name mean nothing; protocols and
 *   container formats limited, so that playlists and concat scripts cannot open their neighbours);
 * - runs under `prlimit --as`, because a small picture file can ask for gigabytes;
 * - runs under `setpriv --pdeathsig KILL`, so that the kernel ends it when the worker is killed outright (both tools
 *   belong to util-linux and replace themselves by the next program, so there is one process to signal);
 * - ends when its time is up, its signal fires, or it writes more than it may.
 */

/** Containers that builders' cameras, phones and recorders write. Nothing in this list refers to other files. */
export const ALLOWED_FORMATS = ['mov', 'matroska', 'webm', 'avi', 'mpegts', 'mp3', 'wav', 'ogg', 'aac', 'flac']
/** A little above 8K (33 million): larger claims are mistakes or attacks. */
export const MAX_PIXELS = 40_000_000
/** Phones and action cameras write up to 8 (picture, sound, several data tracks). */
export const MAX_STREAMS = 16

const MEMORY_BYTES = 4 * 1024 ** 3
const KEPT_STDERR = 16_384
const FIRST_FREE_FD = 4

/** Why a call did not succeed. */
export type RunFailure = 'failed' | 'timed-out' | 'aborted' | 'too-much-output' | 'out-of-memory' | 'out-of-space' | 'not-installed'

/** A failed call. `stderr` is for logs and for telling faults apart, not for people. */
export class RunError extends Error {
  constructor(readonly reason: RunFailure, readonly program: string, readonly stderr: string, options?: { cause?: unknown }) {
    super(`${program} ${reason}: ${stderr.trim().split('\n').slice(-3).join(' | ').slice(0, 500)}`, options)
    this.name = 'RunError'
  }
}

/** Something that takes what a program writes, chunk by chunk, without keeping it all. */
export type Sink = (chunk: Buffer) => void

export interface RunOptions {
  signal?: AbortSignal
  /** Wall-clock limit in ms; 60 s when not given. */
  timeoutMs?: number
  /** Limit of address space in bytes; 4 GiB when not given. */
  memoryBytes?: number
  /** Where standard output goes; without it, it is returned. A stream holds the program back when it is full. */
  onStdout?: Sink | Writable
  /** Most bytes that standard output may hold when it is returned; 32 MiB when not given. */
  maxStdoutBytes?: number
  /** Further pipes for ffmpeg to write to: the first is `pipe:4`, the second `pipe:5` … */
  extraPipes?: Sink[]
  stdin?: Readable | Buffer
  /** Called with the position in ms that the output has reached (ffmpeg only). */
  onProgress?: (positionMs: number) => void
}

export interface RunResult { stdout: Buffer, stderr: string }

/** Name of an extra pipe for use in ffmpeg arguments. */
export function pipeName(extraPipe: number): string {
  return `pipe:${FIRST_FREE_FD + extraPipe}`
}

/** A local file as ffmpeg must be told of it. Throws on relative paths, which could be taken for options. */
export function localFile(path: string): string {
  if (!isAbsolute(path)) throw new TypeError(`ffmpeg is given absolute paths only, not ${path}`)
  return `file:${path}`
}

/** Limits that belong before every `-i` of an uploaded file. */
export function inputLimits(formats: readonly string[] = ALLOWED_FORMATS): string[] {
  return [
    '-protocol_whitelist', 'file,pipe', '-format_whitelist', formats.join(','),
    '-max_pixels', String(MAX_PIXELS), '-max_streams', String(MAX_STREAMS),
  ]
}

/** Decoder threads: more than four gain little and each takes a set of pictures in memory. */
export function decoderThreads(): string[] {
  return ['-threads', String(Math.min(4, availableParallelism()))]
}

/**
 * Runs ffmpeg and waits for its end.
 * @param args everything after the general switches; inputs through {@link inputLimits} and {@link localFile}
 * @throws RunError
 */
export function runFfmpeg(args: string[], options: RunOptions = {}): Promise<RunResult> {
  const general = ['-hide_banner', ...options.stdin ? [] : ['-nostdin'], '-v', 'error', '-y']
  const progress = options.onProgress ? ['-progress', 'pipe:3', '-stats_period', '0.5'] : ['-nostats']
  return run('ffmpeg', [...general, ...progress, ...args], options)
}

/**
 * Runs ffprobe on one local file.
 * @throws RunError
 */
export function runFfprobe(path: string, args: string[], options: RunOptions = {}): Promise<RunResult> {
  return run('ffprobe', ['-hide_banner', '-v', 'error', ...inputLimits(), ...args, '-i', localFile(path)], options)
}

async function run(program: string, args: string[], options: RunOptions): Promise<RunResult> {
  options.signal?.throwIfAborted()
  const stop = new AbortController()
  const signals = options.signal ? [options.signal, stop.signal] : [stop.signal]
  const memory = options.memoryBytes ?? MEMORY_BYTES
  const child = execa('setpriv', ['--pdeathsig', 'KILL', '--', 'prlimit', `--as=${memory}`, '--', program, ...args], {
    stdio: [options.stdin ? 'pipe' : 'ignore', 'pipe', 'pipe', 'pipe', ...(options.extraPipes ?? []).map(() => 'pipe' as const)],
    buffer: false,
    reject: false,
    // glibc would otherwise reserve 64 MB of address space per thread, which counts against --as.
    env: { MALLOC_ARENA_MAX: '2', AV_LOG_FORCE_NOCOLOR: '1' },
    timeout: options.timeoutMs ?? 60_000,
    cancelSignal: AbortSignal.any(signals),
    killSignal: 'SIGKILL',
  } as never) as unknown as Child

  const stdout: Buffer[] = []
  let stdoutBytes = 0
  let tooMuch = false
  const maxStdout = options.maxStdoutBytes ?? 32 * 1024 ** 2
  if (options.onStdout instanceof Writable) child.stdio[1]!.pipe(options.onStdout)
  else child.stdio[1]!.on('data', options.onStdout ?? ((chunk: Buffer) => {
    stdoutBytes += chunk.length
    if (stdoutBytes <= maxStdout) stdout.push(chunk)
    else if (!tooMuch) {
      tooMuch = true
      stop.abort()
    }
  }))
  let stderr = ''
  child.stdio[2]!.on('data', (chunk: Buffer) => {
    stderr = (stderr + chunk.toString('utf8')).slice(-KEPT_STDERR)
  })
  child.stdio[3]!.on('data', progressReader(options.onProgress))
  options.extraPipes?.forEach((sink, i) => child.stdio[FIRST_FREE_FD + i]!.on('data', sink))
  feed(child, options.stdin)

  const result = await child
  if (tooMuch) throw new RunError('too-much-output', program, stderr)
  // The job ended this on purpose: the caller's own reason says more than ours could.
  options.signal?.throwIfAborted()
  if (result.timedOut) throw new RunError('timed-out', program, stderr)
  if (result.failed) throw new RunError(reasonOf(result, stderr), program, stderr, { cause: result })
  return { stdout: Buffer.concat(stdout), stderr }
}

/** What this file uses of execa's process, whose own type depends on the literal number of pipes. */
interface Child extends Promise<{ failed: boolean, timedOut: boolean, code?: string, exitCode?: number, signal?: string }> {
  stdio: (Readable | null)[]
  stdin: NodeJS.WritableStream | null
}

function feed(child: Child, stdin: Readable | Buffer | undefined) {
  if (!stdin || !child.stdin) return
  // A reader that stops early closes the pipe; its exit code tells what happened.
  child.stdin.on('error', () => {})
  if (Buffer.isBuffer(stdin)) child.stdin.end(stdin)
  else stdin.pipe(child.stdin)
}

function reasonOf(result: { code?: string, exitCode?: number }, stderr: string): RunFailure {
  if (/error while loading shared libraries.*failed to map/.test(stderr)) return 'out-of-memory'
  if (result.code === 'ENOENT' || result.exitCode === 127) return 'not-installed'
  if (/No space left on device|Disk quota exceeded/.test(stderr)) return 'out-of-space'
  // ffmpeg also says "Cannot allocate memory" when a file has more streams than it may.
  if (/Cannot allocate memory|std::bad_alloc/.test(stderr) && !/max_streams/.test(stderr)) return 'out-of-memory'
  return 'failed'
}

function progressReader(report: RunOptions['onProgress']): Sink {
  let rest = ''
  return (chunk) => {
    if (!report) return
    const lines = (rest + chunk.toString('latin1')).split('\n')
    rest = lines.pop() ?? ''
    const last = lines.findLast(line => /^out_time_us=\d/.test(line))
    if (last) report(Math.round(Number(last.slice('out_time_us='.length)) / 1000))
  }
}
