import type { LogPreview } from '../../../shared/schemas/logs'
import { LapsError } from './errors'

export type LogEncoding = LogPreview['encoding']

/** First bytes by which a file that is no text gives itself away, and what it then is. */
const SIGNATURES: readonly { at: number, bytes: readonly number[], what: string }[] = [
  { at: 0, bytes: [0x89, 0x50, 0x4E, 0x47], what: 'a PNG picture' },
  { at: 0, bytes: [0xFF, 0xD8, 0xFF], what: 'a JPEG picture' },
  { at: 0, bytes: [0x47, 0x49, 0x46, 0x38], what: 'a GIF picture' },
  { at: 0, bytes: [0x49, 0x49, 0x2A, 0x00], what: 'a TIFF picture' },
  { at: 0, bytes: [0x4D, 0x4D, 0x00, 0x2A], what: 'a TIFF picture' },
  { at: 0, bytes: [0x25, 0x50, 0x44, 0x46], what: 'a PDF document' },
  { at: 0, bytes: [0x50, 0x4B, 0x03, 0x04], what: 'a zip archive (spreadsheet files are such archives too)' },
  { at: 0, bytes: [0x1F, 0x8B], what: 'a gzip archive' },
  { at: 0, bytes: [0x37, 0x7A, 0xBC, 0xAF], what: 'a 7z archive' },
  { at: 0, bytes: [0x52, 0x61, 0x72, 0x21], what: 'a RAR archive' },
  { at: 0, bytes: [0xD0, 0xCF, 0x11, 0xE0], what: 'an older office document' },
  { at: 0, bytes: [0x53, 0x51, 0x4C, 0x69, 0x74, 0x65, 0x20, 0x66], what: 'an SQLite database' },
  { at: 4, bytes: [0x66, 0x74, 0x79, 0x70], what: 'a video' },
]

/** Share of control characters above which a file without NULs still counts as binary. Common practice, no source. */
const MOST_CONTROLS = 0.01

/**
 * The encoding of a text file, from its first bytes: a byte order mark where there is one, else UTF-8 if the bytes are
 * valid UTF-8, else Latin-1 (which every byte string is, and in which degree signs of older loggers are written).
 * @param head first bytes of the file; may end within a character unless `complete`
 * @throws {LapsError} 'not_text' when the bytes are no text; the message says what they seem to be
 * @see RFC 3629 (UTF-8), RFC 2781 section 3.2 (UTF-16 byte order mark). O(n).
 */
export function detectEncoding(head: Uint8Array, complete: boolean): LogEncoding {
  const signature = SIGNATURES.find(({ at, bytes }) => bytes.every((byte, i) => head[at + i] === byte))
  if (signature) {
    throw new LapsError('not_text', `The file is ${signature.what}, not a table of text. Export the log as CSV and upload that.`)
  }
  if (head[0] === 0xFF && head[1] === 0xFE) return 'utf-16le'
  if (head[0] === 0xFE && head[1] === 0xFF) return 'utf-16be'
  refuseControls(head)
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: !complete })
    return 'utf-8'
  }
  catch {
    return 'latin1'
  }
}

function refuseControls(head: Uint8Array): void {
  let controls = 0
  for (const byte of head) {
    if (byte === 0) throw new LapsError('not_text', 'The file holds NUL bytes, so it is binary data and not a table of text. Export the log as CSV and upload that.')
    if (byte < 32 && byte !== 9 && byte !== 10 && byte !== 12 && byte !== 13) controls++
  }
  if (controls > head.length * MOST_CONTROLS) {
    throw new LapsError('not_text', 'The file holds control characters all over, so it seems to be binary data and not a table of text. Export the log as CSV and upload that.')
  }
}

/** Encoding of what a transcoder hands on: delimiters, digits, quotes and line ends are single ASCII bytes. */
export function innerEncoding(encoding: LogEncoding): 'utf-8' | 'latin1' {
  return encoding === 'latin1' ? 'latin1' : 'utf-8'
}

export interface Transcoder {
  push: (bytes: Uint8Array) => Uint8Array
  /** What is left of a character that was cut. */
  end: () => Uint8Array
}

/**
 * Turns UTF-16 into UTF-8 chunk by chunk, so that everything after it works on ASCII-compatible bytes. UTF-8 and
 * Latin-1 pass through as they are, without a copy; chunk boundaries may lie within a character.
 */
export function createTranscoder(encoding: LogEncoding): Transcoder {
  if (encoding === 'utf-8' || encoding === 'latin1') return { push: bytes => bytes, end: () => new Uint8Array(0) }
  const decoder = new TextDecoder(encoding)
  const encoder = new TextEncoder()
  return {
    push: bytes => encoder.encode(decoder.decode(bytes, { stream: true })),
    end: () => encoder.encode(decoder.decode()),
  }
}
