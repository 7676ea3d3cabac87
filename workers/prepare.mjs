// What a bare machine needs before anything else can run. Only Node's own modules: nothing is installed yet.
import { execFileSync, spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

export const root = dirname(dirname(fileURLToPath(import.meta.url)))

export function say(text) {
  console.log(`ribband  ${text}`)
}

/** Stops with one line for people. */
export function refuse(text) {
  console.error(`ribband  ${text}`)
  process.exit(1)
}

export function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major < 20 || (major === 20 && minor < 19)) refuse(`Node ${process.versions.node} is too old: Ribband needs 20.19 or later.`)
}

/** Installs npm packages from the lock when it changed since the last time. */
export function installPackages() {
  const lock = createHash('sha256').update(readFileSync(join(root, 'package-lock.json'))).digest('hex')
  const mark = join(root, 'node_modules/.ribband-lock')
  if (existsSync(mark) && readFileSync(mark, 'utf8') === lock) return
  say('installing npm packages from the lock (two minutes or so the first time) …')
  const result = spawnSync('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], { cwd: root, stdio: ['ignore', 'ignore', 'inherit'] })
  if (result.status !== 0) refuse('npm ci failed: the lines above say why. Nothing else was touched; run the command again when it is mended.')
  writeFileSync(mark, lock)
}

const NEEDED = {
  postgresql: () => existsSync('/usr/lib/postgresql') && readdirSync('/usr/lib/postgresql').some(version => existsSync(`/usr/lib/postgresql/${version}/bin/initdb`)),
  ffmpeg: () => onPath('ffmpeg') && onPath('ffprobe'),
  chromium: () => existsSync('/usr/bin/chromium'),
}

/** Installs the Debian packages that are missing, or says which to install by hand. */
export function installDebianPackages(names) {
  const missing = names.filter(name => !NEEDED[name]())
  if (!missing.length) return
  const byHand = `Install by hand and start again:  apt-get install --no-install-recommends ${missing.join(' ')}`
  if (!onPath('apt-get')) refuse(`These programs are missing: ${missing.join(', ')}. ${byHand}`)
  const asRoot = process.getuid() === 0
  if (!asRoot && spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status !== 0 && !process.stdin.isTTY) refuse(`These Debian packages are missing and need root to install: ${missing.join(', ')}. ${byHand}`)
  say(`installing Debian packages: ${missing.join(', ')} …`)
  const apt = args => spawnSync(asRoot ? 'apt-get' : 'sudo', [...(asRoot ? [] : ['DEBIAN_FRONTEND=noninteractive', 'apt-get']), ...args], { stdio: ['inherit', 'ignore', 'inherit'], env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } }).status
  apt(['update', '-qq'])
  // Debian would start a cluster of its own with postgresql; ours has its own folder, and theirs is not touched.
  if (apt(['install', '-y', '-qq', '--no-install-recommends', ...missing]) !== 0 || missing.some(name => !NEEDED[name]())) refuse(`Debian packages could not be installed: ${missing.join(', ')}. ${byHand}`)
}

function onPath(program) {
  try {
    execFileSync('sh', ['-c', `command -v ${program}`], { stdio: 'ignore' })
    return true
  }
  catch {
    return false
  }
}

/** One number for everything that a build of the site depends on. */
export function sourcesHash() {
  const hash = createHash('sha256')
  const visit = (path) => {
    for (const entry of readdirSync(join(root, path), { withFileTypes: true }).sort((a, b) => a.name < b.name ? -1 : 1)) {
      const child = `${path}/${entry.name}`
      if (entry.isDirectory()) visit(child)
      else hash.update(child).update('\0').update(readFileSync(join(root, child)))
    }
  }
  for (const folder of ['app', 'server', 'shared', 'public']) visit(folder)
  for (const file of ['nuxt.config.ts', 'tailwind.config.ts', 'package-lock.json', 'package.json']) hash.update(file).update(readFileSync(join(root, file)))
  return hash.digest('hex')
}

/** Builds the site when its sources changed since the last build. */
export function buildSite() {
  const mark = join(root, '.output/ribband-sources')
  const now = sourcesHash()
  if (existsSync(mark) && readFileSync(mark, 'utf8') === now) return
  say('building the site (half a minute or so) …')
  rmSync(join(root, '.output'), { recursive: true, force: true })
  const result = spawnSync(process.execPath, [join(root, 'node_modules/nuxt/bin/nuxt.mjs'), 'build'], { cwd: root, encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'], env: { ...process.env, NODE_ENV: 'production' }, maxBuffer: 1 << 26 })
  if (result.status !== 0) {
    console.error(result.stdout + result.stderr)
    refuse('The site could not be built: the lines above say why.')
  }
  writeFileSync(mark, now)
}
