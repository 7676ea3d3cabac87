import { writeFileSync } from 'node:fs'
import type { Curve } from '#server/indexing/pencil/calibration'
import type { Weights } from '#server/indexing/pencil/model'
import type { Fitted } from '#server/indexing/pencil/pencil'

/** Writes the fitted numbers as a source file, so that they are read, compared and reviewed like any other. */
export function writeWeights(file: string, fitted: Fitted, fittedOn: string): void {
  const weights = (of: Weights) => Object.entries(of).filter(([, value]) => Math.abs(value) >= 0.0005).sort(([a], [b]) => a < b ? -1 : 1).map(([name, value]) => `      '${name}': ${Number(value.toFixed(3))},`).join('\n')
  const curve = (of: Curve) => of.map(([x, y]) => `[${Number(x.toFixed(3))}, ${Number(y.toFixed(3))}]`).join(', ')
  const part = (name: 'open' | 'ticked') => `  ${name}: {\n    weights: {\n${weights(fitted[name].weights)}\n    },\n    curve: [${curve(fitted[name].curve)}],\n  },`
  writeFileSync(file, `import type { Fitted } from './pencil'\n\n/** Written by \`npm run fit:indexing\` (${fittedOn}); not by hand. */\nexport const FITTED: Fitted = {\n${part('open')}\n${part('ticked')}\n}\n`)
}
