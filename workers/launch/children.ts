import { type ChildProcess, spawn } from 'node:child_process'
import { createWriteStream, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { commandLine, sleep } from '../local/processes'

export interface ChildOptions {
  name: string
  command: string
  args: string[]
  env?: Record<string, string>
  /** Resolves when the child can be used; it may be asked again after a restart. */
  ready: () => Promise<boolean>
}

/**
 * Keeps child processes running: a child that dies is started again, all stop together, and what an earlier
 * start left behind (it was killed) is stopped first. Their output goes to `.data/logs/NAME.log`.
 */
export function createChildren(dataDir: string, tell: (text: string) => void) {
  const running: { name: string, stop: () => Promise<void> }[] = []
  let stopping = false
  const pids = join(dataDir, 'run')
  mkdirSync(pids, { recursive: true })
  mkdirSync(join(dataDir, 'logs'), { recursive: true })

  async function start(options: ChildOptions): Promise<void> {
    await stopLeftOver(options)
    let child: ChildProcess
    let ended = Promise.resolve()
    const launch = () => {
      const log = createWriteStream(join(dataDir, 'logs', `${options.name}.log`), { flags: 'a' })
      // Dies with us even when we are killed without a chance to stop it.
      child = spawn('/usr/bin/setpriv', ['--pdeathsig', 'TERM', options.command, ...options.args], { env: { ...process.env, ...options.env }, stdio: ['ignore', 'pipe', 'pipe'] })
      child.stdout!.pipe(log)
      child.stderr!.pipe(log)
      writeFileSync(join(pids, options.name), String(child.pid))
      ended = new Promise(resolve => child.once('exit', () => resolve()))
      const born = Date.now()
      child.once('exit', (code, signal) => {
        if (stopping) return
        tell(`${options.name} ended (${signal ?? `code ${code}`}); starting it again. Its log: ${join(dataDir, 'logs', `${options.name}.log`)}`)
        setTimeout(() => stopping || launch(), Date.now() - born < 5000 ? 2000 : 200)
      })
    }
    launch()
    running.push({
      name: options.name,
      stop: async () => {
        child.kill('SIGTERM')
        const patience = setTimeout(() => child.kill('SIGKILL'), 15_000)
        if (child.exitCode === null && child.signalCode === null) await ended
        clearTimeout(patience)
        rmSync(join(pids, options.name), { force: true })
      },
    })
    for (let waited = 0; !await options.ready(); waited += 100) {
      if (waited > 60_000) throw new Error(`${options.name} did not answer within a minute. Its log: ${join(dataDir, 'logs', `${options.name}.log`)}`)
      if (child!.exitCode !== null && waited > 3000) throw new Error(`${options.name} stopped while starting. Its log: ${join(dataDir, 'logs', `${options.name}.log`)}\n${readFileSync(join(dataDir, 'logs', `${options.name}.log`), 'utf8').slice(-1500)}`)
      await sleep(100)
    }
  }

  async function stopLeftOver(options: ChildOptions): Promise<void> {
    let pid: number
    try {
      pid = Number(readFileSync(join(pids, options.name), 'utf8'))
    }
    catch {
      return
    }
    // The number may be somebody else's by now: only a process with our very words is stopped.
    const ours = () => commandLine(pid)?.includes(options.args.join(' '))
    for (let waited = 0; ours(); waited += 100) {
      process.kill(pid, waited < 5000 ? 'SIGTERM' : 'SIGKILL')
      await sleep(100)
    }
  }

  return {
    start,
    /** Adds something that stops by its own means (the database). */
    add: (name: string, stop: () => Promise<void>) => running.push({ name, stop }),
    /** Stops in the opposite order of starting, so that nothing loses what it stands on. */
    async stop(): Promise<void> {
      stopping = true
      for (const one of running.reverse()) await one.stop()
      running.length = 0
    },
    get stopping() { return stopping },
  }
}
