import { planking } from './script/planking'
import { strongback } from './script/strongback'
import { transoms } from './script/transoms'
import type { SessionScript } from './types'

/** Everything said and shown in the demo's three sessions; the footage, captions and chapters come from it. */
export const demoScript: SessionScript[] = [transoms, strongback, planking]
