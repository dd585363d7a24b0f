import type { ColumnMap, LogPreview } from '../../../shared/schemas/logs'
import type { TimeUnit } from './clock'
import type { DecimalMark } from './numbers'
import type { RecordRange } from './records'
import type { RowSink, Slot } from './rows'
import type { ReadLog } from './types'
import { channelKind, channelSlug } from '../../../shared/channels'
import { createClock } from './clock'
import { createTranscoder, innerEncoding } from './decode'
import { LapsError } from './errors'
import { isUsablePosition } from './fixes'
import { decimalMark } from './numbers'
import { createRecordSplitter, splitCells } from './records'
import { createRowSink, FIRST_CAPACITY } from './rows'
import { columnSource } from './text'
import { headerParts } from './units'

export interface LogReader {
  push: (bytes: Uint8Array) => void
  end: () => ReadLog
}

/**
 * Reads a log chunk by chunk into one Float64Array a mapped column, in the unit of storage. Chunks may be cut anywhere;
 * the file is never held as a whole. A cell that cannot be read is missing and reported with its line, and moves no
 * other cell; a row with too many cells is left out, since nothing says which of them is too many; of a last line that
 * was cut short the whole cells are kept. A row without any value in a mapped column is no row.
 * @param preview the shape of this file, from `sniffLog`
 * @param map the confirmed columns
 * @returns push takes the uncompressed bytes in order and neither keeps nor changes them; end gives the result
 * @throws {LapsError} at once 'wrong_header' | 'unknown_unit' | 'no_time' | 'no_position' when the map does not fit;
 *   from push 'wrong_header' | 'no_table'; from end 'no_rows' | 'no_time' | 'no_position'
 * @see RFC 4180 for quoting, numbers.ts and clock.ts for values. O(bytes); memory 8 bytes a mapped cell.
 */
export function createLogReader(preview: LogPreview, map: ColumnMap): LogReader {
  const mark = decimalMark(preview.columns.flatMap(column => column.firstValues), preview.delimiter)
  const slots = createSlots(preview, map, mark)
  const sink = createRowSink(preview, slots, mark)
  const decoder = new TextDecoder(innerEncoding(preview.encoding))
  const transcoder = createTranscoder(preview.encoding)
  const headed = preview.headerRow !== preview.firstDataRow
  let headerSeen = !headed

  function onRecord(record: RecordRange): void {
    if (record.line >= preview.firstDataRow) {
      if (!headerSeen) refuseHeader(preview.headerRow)
      sink.take(record)
    }
    else if (headed && record.line === preview.headerRow) {
      const text = decoder.decode(record.bytes.subarray(record.start, record.end))
      checkHeader(splitCells(text, preview.delimiter, record.quoted), slots, preview.headerRow)
      headerSeen = true
    }
  }

  const splitter = createRecordSplitter(preview.delimiter, onRecord)
  return {
    push: bytes => splitter.push(transcoder.push(bytes)),
    end() {
      splitter.push(transcoder.end())
      splitter.end()
      return finish(slots, preview.headerRow, sink)
    },
  }
}

function createSlots(preview: LogPreview, map: ColumnMap, mark: DecimalMark): Slot[] {
  const slots = map.columns.flatMap(({ index, source, channel, unit }): Slot[] => {
    if (channel === null) return []
    const column = preview.columns[index]
    if (column?.source !== source) {
      throw new LapsError('wrong_header', `The columns were confirmed with "${source}" in place ${index + 1}, but this file has ${column ? `"${column.source}"` : 'no column'} there.`, preview.headerRow)
    }
    const known = channelKind(channel)
    const fileUnit = known?.units.find(candidate => candidate.unit === unit)
    if (known && !fileUnit) throw new LapsError('unknown_unit', `The column "${source}" cannot be ${known.label} in "${unit}"; known units: ${known.units.map(({ unit }) => unit).join(', ')}.`, preview.headerRow)
    const clock = channel === 'time' ? createClock(unit as TimeUnit, mark) : undefined
    return [{
      index,
      source,
      channel,
      unit: known?.unit ?? unit,
      factor: fileUnit?.factor ?? 1,
      offset: fileUnit?.offset ?? 0,
      clock,
      values: new Float64Array(FIRST_CAPACITY),
    }]
  })
  for (const [channel, code] of [['time', 'no_time'], ['latitude', 'no_position'], ['longitude', 'no_position']] as const) {
    if (!slots.some(slot => slot.channel === channel)) throw new LapsError(code, `No column of the file is marked as ${channel}; laps need time, latitude and longitude.`, preview.headerRow)
  }
  return slots.sort((a, b) => a.index - b.index)
}

function checkHeader(cells: readonly string[], slots: readonly Slot[], row: number): void {
  for (const { index, source } of slots) {
    if (columnSource(cells[index] ?? '') !== source) refuseHeader(row, source)
  }
}

function refuseHeader(row: number, source?: string): never {
  throw new LapsError('wrong_header', `Line ${row} is not the header with which the columns were confirmed${source === undefined ? '' : `: "${source}" is not in its place`}.`, row)
}

function finish(slots: readonly Slot[], headerRow: number, sink: RowSink): ReadLog {
  const rowNumbers = sink.rowNumbers()
  const problems = sink.problems
  const rows = rowNumbers.length
  if (rows === 0) throw new LapsError('no_rows', 'The file has a header but no rows of values below it.', headerRow)
  const column = (channel: string) => {
    const slot = slots.find(slot => slot.channel === channel)!
    return { slot, values: slot.values.subarray(0, rows) }
  }
  const time = column('time')
  const latitude = column('latitude')
  const longitude = column('longitude')
  refuseUnusable(rowNumbers[0]!, time, latitude, longitude)
  if (time.slot.clock!.withoutZone()) {
    problems.add('time_without_zone', { code: 'time_without_zone', message: 'The times name no time zone and are read as UTC.', row: rowNumbers[0]! })
  }
  const others = slots.filter(slot => ![time.slot, latitude.slot, longitude.slot].includes(slot))
  return {
    rows,
    timeS: time.values,
    rowNumbers,
    latitudeDeg: latitude.values,
    longitudeDeg: longitude.values,
    channels: others.map((slot) => {
      const { channel: name, unit, values } = slot
      return { name, label: labelOf(slot), unit, values: values.subarray(0, rows) }
    }),
    startedAtS: time.slot.clock!.startedAtS(),
    problems: problems.list(),
  }
}

interface Filled {
  slot: Slot
  values: Float64Array
}

function refuseUnusable(firstRow: number, time: Filled, latitude: Filled, longitude: Filled): void {
  if (time.values.every(Number.isNaN)) {
    throw new LapsError('no_time', `The column "${time.slot.source}" tells no time that can be read, from line ${firstRow} to the end. Is it the right column, and is its unit right?`, firstRow)
  }
  for (const { slot, values } of [latitude, longitude]) {
    if (values.every(Number.isNaN)) throw new LapsError('no_position', `The column "${slot.source}" holds no number from line ${firstRow} to the end, so there is no ${slot.channel}.`, firstRow)
  }
  if (latitude.values.some((value, i) => isUsablePosition(value, longitude.values[i]!))) return
  const merged = latitude.values.some(value => Math.abs(value) > 90)
  const why = merged
    ? 'the values are beyond the range of decimal degrees; export positions as decimal degrees, not as degrees and minutes'
    : 'no row has both a latitude and a longitude on the earth (0, 0 stands for no fix)'
  throw new LapsError('no_position', `"${latitude.slot.source}" and "${longitude.slot.source}" give no usable position: ${why}.`, firstRow)
}

/** A known channel's own label; else the header without its unit, numbered as its channel is. */
function labelOf({ channel, source }: Slot): string {
  const known = channelKind(channel)
  if (known) return known.label
  const { name } = headerParts(source)
  const number = /_(\d+)$/.exec(channel)?.[1]
  return number !== undefined && channel === `${channelSlug(name)}_${number}` ? `${name || 'Column'} ${number}` : name || source || channel
}
