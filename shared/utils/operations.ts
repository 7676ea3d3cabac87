import type { Operation } from '../types/trade'

/** How an operation is written for people, as a noun and as what was done. */
export const OPERATION_WORDS: Record<Operation, { label: string, done: string }> = {
  'mark-out': { label: 'Mark out', done: 'marked out' },
  'cut': { label: 'Cut', done: 'cut' },
  'shape': { label: 'Shape', done: 'shaped' },
  'dry-fit': { label: 'Dry fit', done: 'fitted dry' },
  'drill': { label: 'Drill', done: 'drilled' },
  'seal-coat': { label: 'Seal coat', done: 'seal-coated' },
  'glue': { label: 'Glue', done: 'glued' },
  'fasten': { label: 'Fasten', done: 'fastened' },
  'fillet': { label: 'Fillet', done: 'filleted' },
  'laminate': { label: 'Laminate', done: 'laminated' },
  'sand-fair': { label: 'Sand and fair', done: 'sanded and faired' },
  'paint': { label: 'Paint', done: 'painted' },
  'clean-up': { label: 'Clean up', done: 'cleaned up' },
  'plan-talk': { label: 'Talk about the plan', done: 'talked over' },
  'none': { label: 'No work shown', done: 'not work' },
}
