import type { LogPreview } from '../../../shared/schemas/logs'
import type { LogClock } from './clock'
import type { DecimalMark } from './numbers'
import type { ProblemList } from './problems'
import type { RecordRange } from './records'
import { innerEncoding } from './decode'
import { cellNumber, isMissing, plainNumber } from './numbers'
import { createProblems } from './problems'
import { splitCells } from './records'
import { printable } from './text'

export const FIRST_CAPACITY = 4096

/** A mapped column while it is read. Stored value = cell * factor + offset, but for time, which its clock reads. */
export interface Slot {
  index: number
  source: string
  channel: string
  unit: string
  factor: number
  offset: number
  clock: LogClock | undefined
  values: Float64Array
}

/** The table under construction, and what is known of the row at hand. */
interface Rows {
  preview: LogPreview
  slots: readonly Slot[]
  /** Position in `slots` by column, -1 where a column is not mapped. */
  slotAt: Int32Array
  mark: DecimalMark
  decoder: TextDecoder
  problems: ProblemList
  rowNumbers: Uint32Array
  count: number
  // Of the row at hand: mapped cells with something in them, whether it is too long, cells that could not be read.
  filled: number
  extra: boolean
  bad: { slot: Slot, text: string }[]
}

export interface RowSink {
  take: (record: RecordRange) => void
  /** Lines of the rows taken, as many as there are values in every slot. */
  rowNumbers: () => Uint32Array
  problems: ProblemList
}

/**
 * Takes records into the arrays of the slots, which grow by doubling, and collects what was wrong with them. A record
 * without quotes is read straight from its bytes, which makes a long log quick; the others go through papaparse.
 */
export function createRowSink(preview: LogPreview, slots: readonly Slot[], mark: DecimalMark): RowSink {
  const slotAt = new Int32Array(preview.columns.length).fill(-1)
  for (const [i, slot] of slots.entries()) slotAt[slot.index] = i
  const rows: Rows = {
    preview, slots, slotAt, mark,
    decoder: new TextDecoder(innerEncoding(preview.encoding)),
    problems: createProblems(),
    rowNumbers: new Uint32Array(FIRST_CAPACITY),
    count: 0, filled: 0, extra: false, bad: [],
  }
  return {
    take(record) {
      if (rows.count === rows.rowNumbers.length) grow(rows)
      for (const slot of slots) slot.values[rows.count] = Number.NaN
      rows.filled = 0
      rows.extra = false
      const cells = record.quoted ? takeQuoted(rows, record) : takePlain(rows, record)
      if (rows.filled > 0) accept(rows, record, cells)
      if (rows.bad.length > 0) rows.bad = []
    },
    rowNumbers: () => rows.rowNumbers.subarray(0, rows.count),
    problems: rows.problems,
  }
}

/** @returns the number of cells */
function takePlain(rows: Rows, { bytes, start, end }: RecordRange): number {
  const { slots, slotAt } = rows
  const delimiter = rows.preview.delimiter.charCodeAt(0)
  const mark = rows.mark.charCodeAt(0)
  let column = 0
  let from = start
  for (let at = start; at <= end; at++) {
    if (at < end && bytes[at] !== delimiter) continue
    if (at > from) {
      if (column >= slotAt.length) rows.extra = true
      else if (slotAt[column]! >= 0) takeBytes(rows, slots[slotAt[column]!]!, bytes, from, at, mark)
    }
    column++
    from = at + 1
  }
  return column
}

/** @returns the number of cells */
function takeQuoted(rows: Rows, { bytes, start, end }: RecordRange): number {
  const cells = splitCells(rows.decoder.decode(bytes.subarray(start, end)), rows.preview.delimiter, true)
  for (const slot of rows.slots) takeText(rows, slot, cells[slot.index] ?? '')
  rows.extra = cells.slice(rows.slotAt.length).some(cell => cell.trim() !== '')
  return cells.length
}

function takeBytes(rows: Rows, slot: Slot, bytes: Uint8Array, start: number, end: number, mark: number): void {
  const value = plainNumber(bytes, start, end, mark)
  const usable = slot.clock && !Number.isNaN(value) ? slot.clock.fromNumber(value) : value
  if (Number.isNaN(usable)) {
    takeText(rows, slot, rows.decoder.decode(bytes.subarray(start, end)))
    return
  }
  rows.filled++
  store(rows, slot, usable)
}

function takeText(rows: Rows, slot: Slot, text: string): void {
  if (isMissing(text)) return
  rows.filled++
  const value = slot.clock ? slot.clock.fromText(text) : cellNumber(text, rows.mark)
  if (value === undefined) rows.bad.push({ slot, text: text.trim() })
  else store(rows, slot, value)
}

function store({ count }: Rows, { values, clock, factor, offset }: Slot, value: number): void {
  // The clock has done its own scaling. Adding an offset of zero would turn -0 into 0.
  const scaled = clock || factor === 1 ? value : value * factor
  values[count] = offset === 0 ? scaled : scaled + offset
}

/** Keeps the row at hand, unless nothing says which of its cells is which. */
function accept(rows: Rows, { line, ended }: RecordRange, cells: number): void {
  const width = rows.slotAt.length
  if (rows.extra) {
    rows.problems.add('too_many_cells', { code: 'too_many_cells', message: `The row has more cells than the ${width} columns; it is left out, since nothing says which cell is too many.`, row: line })
    return
  }
  if (cells < width && !ended) cutLast(rows, line, cells)
  else if (cells < width) rows.problems.add('too_few_cells', { code: 'too_few_cells', message: `The row has fewer cells than the ${width} columns; those that are there are kept.`, row: line })
  for (const { slot, text } of rows.bad) {
    const [code, what] = slot.clock ? ['bad_time', 'a time'] : ['bad_number', 'a number']
    rows.problems.add(`bad ${slot.index}`, { code, message: `Column "${slot.source}": "${printable(text, 40)}" is not ${what}; the cell counts as missing.`, row: line })
  }
  rows.rowNumbers[rows.count++] = line
}

/** The file ends within a row: its last cell may be half a number. */
function cutLast(rows: Rows, line: number, cells: number): void {
  const slot = rows.slots[rows.slotAt[cells - 1] ?? -1]
  if (slot) {
    slot.values[rows.count] = Number.NaN
    rows.bad = rows.bad.filter(cell => cell.slot !== slot)
  }
  rows.problems.add('cut_last_line', { code: 'cut_last_line', message: 'The file ends in the middle of its last row; the whole cells of that row are kept.', row: line })
}

function grow(rows: Rows): void {
  rows.rowNumbers = grown(rows.rowNumbers, new Uint32Array(rows.count * 2))
  for (const slot of rows.slots) slot.values = grown(slot.values, new Float64Array(rows.count * 2))
}

function grown<T extends Float64Array | Uint32Array>(old: T, larger: T): T {
  larger.set(old)
  return larger
}
