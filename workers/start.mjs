// `npm start`: the whole product on one machine, from a fresh clone.
import { checkNode, installDebianPackages, installPackages } from './prepare.mjs'

checkNode()
installPackages()
installDebianPackages(['postgresql', 'ffmpeg'])
const { register } = await import('tsx/esm/api')
register()
const { start } = await import('./launch/start.ts')
await start({ dev: process.argv.includes('--dev') })
