import type { Operation } from '#shared/types/trade'

/** Tools and the operations they are picked up for. Common practice, no source. */
export const TOOL_OPERATIONS: Record<string, Operation[]> = {
  'jigsaw': ['cut'], 'bandsaw': ['cut'], 'band saw': ['cut'], 'table saw': ['cut'], 'circular saw': ['cut'], 'pull saw': ['cut'], 'handsaw': ['cut'], 'tenon saw': ['cut'],
  'block plane': ['shape'], 'jack plane': ['shape'], 'spokeshave': ['shape'], 'drawknife': ['shape'], 'rasp': ['shape'], 'chisel': ['shape'], 'router': ['shape'],
  'drill press': ['drill'], 'countersink': ['drill'], 'auger': ['drill'], 'hole saw': ['drill'],
  'clamp': ['glue', 'dry-fit'], 'syringe': ['glue'], 'mixing stick': ['glue'],
  'screwdriver': ['fasten'], 'impact driver': ['fasten'], 'hammer': ['fasten'], 'stapler': ['fasten'], 'pliers': ['fasten'],
  'squeegee': ['laminate'], 'laminating roller': ['laminate'],
  'longboard': ['sand-fair'], 'sander': ['sand-fair'], 'sanding block': ['sand-fair'], 'scraper': ['sand-fair', 'clean-up'],
  'paint brush': ['paint'], 'foam roller': ['paint', 'seal-coat'],
  'bevel gauge': ['mark-out'], 'compass': ['mark-out'], 'straight edge': ['mark-out'], 'chalk line': ['mark-out'], 'marking gauge': ['mark-out'],
  'broom': ['clean-up'], 'vacuum': ['clean-up'],
}
