import { OPERATIONS, type Operation } from '../types/trade'

/** One letter for each operation in the picker; close to its name, no two alike. */
export const OPERATION_KEYS: Record<Operation, string> = {
  'mark-out': 'm', 'cut': 'c', 'shape': 'h', 'dry-fit': 'd', 'drill': 'r', 'seal-coat': 's', 'glue': 'g', 'fasten': 'f',
  'fillet': 'i', 'laminate': 'l', 'sand-fair': 'a', 'paint': 'p', 'clean-up': 'u', 'plan-talk': 't', 'none': 'n',
}

export function operationOfKey(key: string): Operation | null {
  return OPERATIONS.find(operation => OPERATION_KEYS[operation] === key.toLowerCase()) ?? null
}
