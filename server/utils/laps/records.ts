import Papa from 'papaparse'
import { LapsError } from './errors'

const LF = 10
const CR = 13
const QUOTE = 34
const SPACE = 32

/**
 * A quoted field still open this many bytes, or line ends within quotes, after its record's start began with a stray
 * quote: its line is plain.
 */
const LONGEST_QUOTED_BYTES = 64 * 1024
const MOST_QUOTED_FEEDS = 100
/** Lines longer than this are no table; the limit keeps memory flat on a file without line ends. */
const LONGEST_LINE_BYTES = 1024 * 1024

/** One record of the file as a range of bytes, without its line end. */
export interface RecordRange {
  bytes: Uint8Array
  start: number
  end: number
  /** Line on which it begins, counted from 1. */
  line: number
  /** True where a cell begins with a quote, so that RFC 4180 quoting applies. */
  quoted: boolean
  /** False for a last record without a line end. */
  ended: boolean
}

export interface RecordSplitter {
  push: (bytes: Uint8Array) => void
  end: () => void
}

/**
 * Cuts a stream of ASCII-compatible bytes into records. Chunk boundaries may lie anywhere. Lines end in LF or CRLF; a
 * quoted cell may hold line ends and delimiters; a quote within an unquoted cell is an ordinary character. The record
 * given to `onRecord` is one object used again and again: read it at once. Pushed bytes are neither kept nor changed.
 * A quote that is not closed within 64 KiB and 100 line ends is a stray one, an ordinary character of its line.
 * @throws {LapsError} 'no_table' when a line is longer than 1 MiB
 * @see RFC 4180 section 2, rules 1, 2 and 5 to 7. O(n), at worst 100 looks at a byte; memory of a chunk and a record.
 */
export function createRecordSplitter(delimiter: string, onRecord: (record: RecordRange) => void): RecordSplitter {
  const delimiterByte = delimiter.charCodeAt(0)
  const record: RecordRange = { bytes: new Uint8Array(0), start: 0, end: 0, line: 1, quoted: false, ended: true }
  let carry: Uint8Array = new Uint8Array(0)
  let line = 1
  let begun = false

  function emit(bytes: Uint8Array, start: number, stop: number, quoted: boolean): void {
    record.bytes = bytes
    record.start = start
    record.end = stop > start && bytes[stop - 1] === CR ? stop - 1 : stop
    record.line = line
    record.quoted = quoted
    record.ended = stop < bytes.length
    onRecord(record)
  }

  /** @returns how many bytes are done with */
  function drain(bytes: Uint8Array, final: boolean): number {
    let at = 0
    if (!begun) {
      if (bytes.length < 3 && !final) return 0
      begun = true
      if (bytes[0] === 0xEF && bytes[1] === 0xBB && bytes[2] === 0xBF) at = 3
    }
    let quote = bytes.indexOf(QUOTE, at)
    while (at < bytes.length) {
      const feed = bytes.indexOf(LF, at)
      const lineStop = feed < 0 ? bytes.length : feed
      if (quote >= 0 && quote < at) quote = bytes.indexOf(QUOTE, at)
      const stop = quote < 0 || quote >= lineStop ? undefined : quotedStop(bytes, at, delimiterByte, final)
      if (stop === 'more' || (feed < 0 && !final && typeof stop !== 'number')) break
      const quoted = typeof stop === 'number'
      const recordStop = quoted ? stop : lineStop
      emit(bytes, at, recordStop, quoted)
      line += quoted ? countFeeds(bytes, at, recordStop) + 1 : 1
      at = recordStop + 1
    }
    return Math.min(at, bytes.length)
  }

  function push(bytes: Uint8Array): void {
    const joined = carry.length === 0 ? bytes : concat(carry, bytes)
    const done = drain(joined, false)
    // Not `slice`, which for a Buffer gives a view of bytes that are not ours to keep.
    carry = new Uint8Array(joined.subarray(done))
    if (carry.length > LONGEST_LINE_BYTES) {
      throw new LapsError('no_table', `Line ${line} is longer than 1 MiB, so the file is not a table of rows.`, line)
    }
  }

  return { push, end: () => void drain(carry, true) }
}

function concat(a: Uint8Array, b: Uint8Array): Uint8Array {
  const joined = new Uint8Array(a.length + b.length)
  joined.set(a)
  joined.set(b, a.length)
  return joined
}

function countFeeds(bytes: Uint8Array, start: number, stop: number): number {
  let feeds = 0
  for (let i = start; i < stop; i++) if (bytes[i] === LF) feeds++
  return feeds
}

/** Where a cell or record ends, or that it goes on beyond these bytes, or that its quote is a stray one. */
type Stop = number | 'more' | 'stray'

/**
 * Where a record with quotes stops: the index of its line feed (or the end of a final chunk). All limits are counted
 * from the record's start, so that the answer does not hang on the chunks; they bound how often a byte is looked at.
 */
function quotedStop(bytes: Uint8Array, start: number, delimiter: number, final: boolean): Stop {
  let at = start
  let fieldStart = true
  let feedsLeft = MOST_QUOTED_FEEDS
  while (at < bytes.length) {
    const byte = bytes[at]
    if (byte === QUOTE && fieldStart) {
      const close = closingQuote(bytes, at + 1, start + LONGEST_QUOTED_BYTES, feedsLeft, delimiter, final)
      if (typeof close !== 'number') return close
      feedsLeft -= countFeeds(bytes, at, close)
      at = close + 1
      fieldStart = false
      continue
    }
    if (byte === LF) return at
    fieldStart = byte === delimiter
    at++
  }
  return final ? at : 'more'
}

/** Index of the quote that closes a field. A quote followed by anything but a cell's end does not close it. */
function closingQuote(
  bytes: Uint8Array, start: number, last: number, mostFeeds: number, delimiter: number, final: boolean,
): Stop {
  let feeds = 0
  for (let at = start; at < bytes.length; at++) {
    if (at > last) return 'stray'
    if (bytes[at] === LF && ++feeds > mostFeeds) return 'stray'
    if (bytes[at] !== QUOTE) continue
    if (bytes[at + 1] === QUOTE) {
      at++
      continue
    }
    let next = at + 1
    while (bytes[next] === SPACE) next++
    if (next >= bytes.length) return final ? at : 'more'
    const byte = bytes[next]
    if (byte === delimiter || byte === LF || byte === CR) return at
  }
  return final || bytes.length > last ? 'stray' : 'more'
}

/** The cells of one record's text: papaparse where quoting applies, a plain split elsewhere. */
export function splitCells(text: string, delimiter: string, quoted: boolean): string[] {
  if (!quoted) return text.split(delimiter)
  return Papa.parse<string[]>(text, { delimiter, newline: '\n' }).data[0] ?? ['']
}

/**
 * All records of a short piece of a file, as text.
 * @param complete false leaves out the last record, which may be cut
 */
export function readRecords(bytes: Uint8Array, delimiter: string, encoding: 'utf-8' | 'latin1', complete: boolean): { line: number, cells: string[] }[] {
  const decoder = new TextDecoder(encoding)
  const records: { line: number, cells: string[] }[] = []
  const splitter = createRecordSplitter(delimiter, ({ bytes, start, end, line, quoted }) => {
    records.push({ line, cells: splitCells(decoder.decode(bytes.subarray(start, end)), delimiter, quoted) })
  })
  splitter.push(bytes)
  if (complete) splitter.end()
  return records
}
