import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { describe, expect, it, vi } from 'vitest'
import { demonstrationFiles } from '../../../../seeds/harrow-fell/demonstration'

// Seconds on a busy machine: the logs are driven and written as a whole.
vi.setConfig({ testTimeout: 30_000 })

const FOLDER = new URL('../../../../server/assets/demonstration/', import.meta.url)
const files = demonstrationFiles()
const logs = Object.keys(files).filter(name => name.endsWith('.csv'))

interface Book {
  outings: { fileName: string, sha256: string, setup: number }[]
  setups: { number: number, basedOn: number | null }[]
}
const book = JSON.parse(files['book.json']!) as Book

describe('demonstrationFiles', () => {
  it.each(logs)('%s in the build is what is written anew, byte for byte', (name) => {
    const onDisk = gunzipSync(readFileSync(new URL(`${name}.gz`, FOLDER))).toString('utf8')
    // Not toBe: a difference of two megabytes is no message.
    expect(onDisk === files[name]).toBe(true)
  })

  it('has its book in the build as it is written anew, and nothing else there', () => {
    expect(readFileSync(new URL('book.json', FOLDER), 'utf8')).toBe(files['book.json'])
    expect(readdirSync(FOLDER).sort()).toEqual(['book.json', ...logs.map(name => `${name}.gz`)].sort())
  })

  it('names a log with its true sha256 for each outing, and every setup that was driven', () => {
    expect(book.outings.map(outing => outing.fileName)).toEqual(logs)
    for (const { fileName, sha256 } of book.outings) {
      expect(createHash('sha256').update(files[fileName]!).digest('hex')).toBe(sha256)
    }
    expect(book.outings.map(outing => outing.setup)).toEqual(book.setups.map(setup => setup.number))
    for (const { basedOn } of book.setups) {
      expect(basedOn === null || book.setups.some(setup => setup.number === basedOn)).toBe(true)
    }
  })

  it('keeps what every build carries under 1.5 MB', () => {
    const bytes = readdirSync(FOLDER).reduce((sum, name) => sum + readFileSync(new URL(name, FOLDER)).length, 0)
    expect(bytes).toBeLessThan(1.5e6)
  })
})
