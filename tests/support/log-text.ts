import type { LogPreview } from '../../shared/schemas/logs'
import type { ReadLog } from '../../server/utils/laps/types'
import { createLogReader } from '../../server/utils/laps/read'
import { sniffLog } from '../../server/utils/laps/sniff'

export function utf8(text: string): Uint8Array {
  return new TextEncoder().encode(text)
}

/** UTF-16 with a byte order mark. */
export function utf16(text: string, order: 'le' | 'be'): Uint8Array {
  const bytes = new Uint8Array(2 + text.length * 2)
  const view = new DataView(bytes.buffer)
  view.setUint16(0, 0xFEFF, order === 'le')
  for (let i = 0; i < text.length; i++) view.setUint16(2 + i * 2, text.charCodeAt(i), order === 'le')
  return bytes
}

/** Every character below U+0100 as one byte. */
export function latin1(text: string): Uint8Array {
  return Uint8Array.from(text, character => character.charCodeAt(0))
}

export function sniffText(text: string): LogPreview {
  return sniffLog(utf8(text), { complete: true })
}

/** Reads a whole file as the guess maps it, in chunks that end at `cuts` (positions, rising). */
export function readBytes(
  bytes: Uint8Array, cuts: readonly number[] = [], preview = sniffLog(bytes, { complete: true }),
): ReadLog {
  const reader = createLogReader(preview, { columns: preview.columns })
  let from = 0
  for (const cut of [...cuts, bytes.length]) {
    reader.push(bytes.subarray(from, cut))
    from = cut
  }
  return reader.end()
}

export function readText(text: string): ReadLog {
  return readBytes(utf8(text))
}

/** Code and row of the error that `run` throws; fails when it throws none or another kind. */
export function refusal(run: () => unknown): { code: unknown, row: unknown, message: string } {
  try {
    run()
  }
  catch (error) {
    if (!(error instanceof Error)) throw error
    const { code, row } = error as Error & { code?: unknown, row?: unknown }
    return { code, row, message: error.message }
  }
  throw new Error('nothing was thrown')
}
