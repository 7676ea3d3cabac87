/** What is wrong with one cell (or row, or the whole table) of an import, in a sentence that says where. */
export interface TableProblem {
  /** As a spreadsheet counts: the heading is row 1. */
  row: number
  /** The heading's name; null when the whole row is meant. */
  column: string | null
  message: string
}

export interface TableInfo {
  layout: 'csv' | 'markdown'
  /** What stands between the cells. */
  separator: ',' | ';' | '\t' | '|'
  encoding: string
  /** Columns of the file that mean nothing here, as written. Their cells are left out. */
  unknownColumns: string[]
  /** What else was odd, in sentences; none of it stops an import. */
  warnings: string[]
}

/** One field that an import would change, as text for people. */
export interface FieldChange { column: string, from: string, to: string }

export interface PreviewRow {
  row: number
  /** The step's number, or null for a part. */
  number: number | null
  /** The step's title or the part's name. */
  title: string
  outcome: 'new' | 'changed' | 'same'
  /** True when the row brings an archived step or part back. */
  restored: boolean
  changes: FieldChange[]
}

/** POST /api/builds/:build/plan/preview: what an import would do; nothing is written. */
export interface ImportPreview extends TableInfo {
  what: 'steps' | 'parts'
  /** Headings, as written, that mean something in a table of this kind: why it was taken for one. */
  columns: string[]
  rows: PreviewRow[]
  problems: TableProblem[]
  /** Parts that steps name and the list does not have: they would be added. */
  newParts: string[]
  /** Archived parts that steps name: they would come back. */
  restoredParts: string[]
  /** Steps or parts of the build that the table leaves out: they stay as they are. */
  staying: string[]
  /** Names this preview; an import that names another one is refused, because the plan changed in between. */
  seen: string
}

/** POST /api/builds/:build/plan/import */
export interface ImportResult { what: 'steps' | 'parts', added: number, changed: number, same: number, newParts: number }
