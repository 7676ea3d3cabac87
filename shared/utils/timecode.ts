// One door to everything about time. The parts lie in a folder that Nuxt does not scan, so that each
// name is auto-imported once.
export { canDropFrames, frameToMs, frameToTimecode, msToFrame, timecodeToFrame, type FrameRate } from './time/frames'
export { formatClock, formatSeconds, formatTimeFragment, parseClock, parseTimeFragment, type TimeFragment } from './time/clock'
