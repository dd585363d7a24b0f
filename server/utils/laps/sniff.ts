import type { LogPreview } from '../../../shared/schemas/logs'
import type { FoundColumn } from './guess'
import type { DecimalMark } from './numbers'
import { parseClock } from './clock'
import { createTranscoder, detectEncoding, innerEncoding } from './decode'
import { LapsError } from './errors'
import { guessColumns, knownNames } from './guess'
import { cellNumber, decimalMark, isMissing } from './numbers'
import { readRecords } from './records'
import { columnSource } from './text'
import { knownUnit } from './units'

const DELIMITERS = [',', ';', '\t', '|'] as const
const MOST_COLUMNS = 400
/** Rows that the guess looks at. */
const MOST_ROWS = 500

interface Line {
  line: number
  cells: string[]
}

interface Table {
  delimiter: string
  mark: DecimalMark
  lines: Line[]
  /** Cells of most rows. */
  width: number
  /** Rows of that width. */
  rows: number
}

/**
 * Finds the shape of a log from its first bytes: encoding, delimiter, lines above the header, header, units, first
 * values, and for each column a guess of the channel and its unit with the reason.
 *
 * The delimiter is the one that cuts the most rows into the same number of cells (at least two), the comma first. A row
 * of values is one whose cells are numbers or times where the rows further down have them; the header is the line above
 * the first such row that names the most known channels, the lowest of equals. Without a header the columns are called
 * `column 1` and so on, and `headerRow` equals `firstDataRow`.
 * @param head up to the first 64 KiB, uncompressed
 * @param options complete: `head` is the whole file, so that its last line is whole too
 * @throws {LapsError} 'empty_file' | 'not_text' | 'no_table'
 * @see RFC 4180 for the table. O(n).
 */
export function sniffLog(head: Uint8Array, options: { complete?: boolean } = {}): LogPreview {
  const complete = options.complete ?? false
  const encoding = detectEncoding(head, complete)
  const transcoder = createTranscoder(encoding)
  const bytes = transcoder.push(head)
  if (isBlank(bytes)) throw new LapsError('empty_file', 'The file is empty. Perhaps the logger had not finished writing it; copy it again.')
  const table = findTable(bytes, innerEncoding(encoding), complete)
  const shape = findShape(table)
  const columns = guessColumns(describeColumns(table, shape), table.mark, shape.header !== undefined)
  const firstData = table.lines[shape.firstData]
  const headerRow = shape.header === undefined ? firstData!.line : table.lines[shape.header]!.line
  return {
    encoding,
    delimiter: table.delimiter,
    headerRow,
    unitsRow: shape.units === undefined ? null : table.lines[shape.units]!.line,
    firstDataRow: firstData?.line ?? (table.lines.at(-1)!.line + 1),
    columns,
  }
}

/**
 * A stable text of a file's header, by which a mapping that a person has confirmed is found again. It holds the names,
 * the delimiter, and the units of a units row, since the same names in another unit need another mapping.
 * @returns null for a file without a header, of which nothing could be remembered
 */
export function headerKey(preview: LogPreview): string | null {
  if (preview.headerRow === preview.firstDataRow) return null
  const units = preview.unitsRow === null ? [] : preview.columns.map(column => column.confidence === 'likely' ? '' : column.unit)
  return JSON.stringify([preview.delimiter, preview.columns.map(column => column.source), units])
}

/** Nothing but spaces, line ends and a byte order mark. */
function isBlank(bytes: Uint8Array): boolean {
  return new TextDecoder().decode(bytes).trim() === ''
}

function findTable(bytes: Uint8Array, encoding: 'utf-8' | 'latin1', complete: boolean): Table {
  let best: Table | undefined
  for (const delimiter of DELIMITERS) {
    const lines = readRecords(bytes, delimiter, encoding, complete).filter(({ cells }) => cells.some(cell => cell.trim() !== ''))
    const { width, rows } = commonWidth(lines)
    if (width < 2 || (best && rows <= best.rows)) continue
    best = { delimiter, lines, width, rows, mark: decimalMark(lines.flatMap(({ cells }) => cells), delimiter) }
  }
  if (!best) throw new LapsError('no_table', 'No table was found: the lines are not cut into columns by comma, semicolon, tab or bar.')
  if (best.width > MOST_COLUMNS) throw new LapsError('no_table', `The table has ${best.width} columns; at most ${MOST_COLUMNS} can be read.`)
  return best
}

function commonWidth(lines: readonly Line[]): { width: number, rows: number } {
  const counts = new Map<number, number>()
  for (const { cells } of lines) if (cells.length > 1) counts.set(cells.length, (counts.get(cells.length) ?? 0) + 1)
  let width = 0
  let rows = 0
  for (const [cells, count] of counts) {
    if (count > rows || (count === rows && cells > width)) [width, rows] = [cells, count]
  }
  return { width, rows }
}

interface Shape {
  /** Positions in `lines`. */
  header: number | undefined
  units: number | undefined
  firstData: number
}

function findShape({ lines, width, mark }: Table): Shape {
  const numeric = numericColumns(lines, width, mark)
  const looksLikeData = ({ cells }: Line) => isDataRow(cells, numeric, width, mark)
  const firstNumbers = lines.findIndex(looksLikeData)
  if (firstNumbers < 0 && lines.length > 1 && numeric.length === 0) {
    throw new LapsError('no_table', 'No table of numbers was found: no column of the file holds numbers below a header.')
  }
  if (firstNumbers === 0) return { header: undefined, units: undefined, firstData: 0 }
  const above = lines.slice(0, firstNumbers < 0 ? undefined : firstNumbers)
  const header = findHeader(above, width)
  if (header === undefined) return { header: undefined, units: undefined, firstData: firstNumbers }
  const units = lines[header + 1] && isUnitsRow(lines[header + 1]!.cells) ? header + 1 : undefined
  return { header, units, firstData: (units ?? header) + 1 }
}

/** Columns that hold numbers or times in at least four of five filled cells of the lowest third of the lines. */
function numericColumns(lines: readonly Line[], width: number, mark: DecimalMark): number[] {
  const third = lines.slice(-Math.ceil(lines.length / 3))
  const lower = third.filter(({ cells }) => cells.length === width).slice(0, MOST_ROWS)
  return Array.from({ length: width }, (_, i) => i).filter((i) => {
    const filled = lower.filter(({ cells }) => !isMissing(cells[i]!))
    return filled.length > 0 && filled.filter(({ cells }) => isValue(cells[i]!, mark)).length >= 0.8 * filled.length
  })
}

function isValue(cell: string, mark: DecimalMark): boolean {
  return cellNumber(cell, mark) !== undefined || parseClock(cell) !== undefined
}

function isDataRow(cells: readonly string[], numeric: readonly number[], width: number, mark: DecimalMark): boolean {
  if (cells.length < 2 || cells.length < width - 1) return false
  const filled = numeric.filter(i => cells[i] !== undefined && !isMissing(cells[i]!))
  return filled.length > 0 && filled.filter(i => isValue(cells[i]!, mark)).length >= 0.8 * filled.length
}

function findHeader(above: readonly Line[], width: number): number | undefined {
  let header: number | undefined
  let most = -1
  for (const [i, { cells }] of above.entries()) {
    // A header may have one cell more or less than the rows, where one of them ends in a delimiter.
    if (cells.length < 2 || Math.abs(cells.length - width) > 1 || (header !== undefined && isUnitsRow(cells))) continue
    const names = knownNames(cells)
    if (names >= most) [header, most] = [i, names]
  }
  return header
}

/** A units row: every filled cell is short and at least half of them are units that are known. */
function isUnitsRow(cells: readonly string[]): boolean {
  const filled = cells.filter(cell => !isMissing(cell))
  if (filled.length === 0 || filled.some(cell => cell.trim().length > 14)) return false
  return filled.filter(cell => knownUnit(cell) !== undefined).length * 2 >= filled.length
}

function describeColumns({ lines, width }: Table, { header, units, firstData }: Shape): FoundColumn[] {
  const names = header === undefined ? Array.from({ length: width }, (_, i) => `column ${i + 1}`) : lines[header]!.cells
  const nameless = names.length > width && names.slice(width).every(name => name.trim() === '')
  const rows = lines.slice(firstData, firstData + MOST_ROWS)
  return Array.from({ length: nameless ? width : Math.max(width, names.length) }, (_, index) => ({
    index,
    source: columnSource(names[index] ?? ''),
    unitText: units === undefined ? '' : (lines[units]!.cells[index] ?? '').trim().replace(/^[([{<](.*)[)\]}>]$/, '$1'),
    values: rows.map(({ cells }) => (cells[index] ?? '').trim()),
  }))
}
