import { createHash } from 'node:crypto'
import { createReadStream, createWriteStream } from 'node:fs'
import { mkdir, open, rm } from 'node:fs/promises'
import path from 'node:path'
import process from 'node:process'
import { PassThrough, Transform, Writable, type Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { createGunzip } from 'node:zlib'
import { LOG_LIMIT_BYTES } from '../../shared/gzip'
import { ProblemError } from './problems'

const KEY = /^[0-9a-f-]{36}\/[0-9a-f-]{36}$/

/** Where the file of a log lies, by its storage key `team/log`. */
function placeOf(key: string): string {
  if (!KEY.test(key)) throw new Error(`not a storage key: ${key}`)
  return path.join(process.env.LAPWRIGHT_STORAGE_DIR ?? 'storage', 'logs', key)
}

export interface StoredFile {
  sha256: string
  sizeBytes: number
}

export interface LogSink {
  stream: Writable
  /** Resolves when every byte is on the disk; rejects with what went wrong. */
  done: Promise<StoredFile>
  /** Resolves when nothing writes any more, however it ended: only then can the file be removed for good. */
  closed: () => Promise<void>
}

/**
 * A stream that keeps a log: gzip is recognised by its first bytes and taken off, the uncompressed bytes are counted
 * and hashed on their way to the disk. A bomb is stopped at the limit, before it can fill anything.
 */
export async function openLogSink(key: string): Promise<LogSink> {
  const place = placeOf(key)
  await mkdir(path.dirname(place), { recursive: true })
  const { counter, counted } = makeCounter()
  const entry = new PassThrough()
  let flow: Promise<void> | undefined
  const begin = (first: Buffer) => {
    const zipped = first[0] === 0x1F && first[1] === 0x8B
    const target = createWriteStream(place)
    flow = zipped ? pipeline(entry, createGunzip(), counter, target) : pipeline(entry, counter, target)
    flow.catch(error => stream.destroy(error as Error))
  }
  let held: Buffer = Buffer.alloc(0)
  const stream = new Writable({
    write(chunk: Buffer, _encoding, done) {
      if (!flow) {
        // Two bytes tell gzip from text; the first chunk of a slow connection can be shorter.
        held = Buffer.concat([held, chunk])
        if (held.length < 2) return done()
        begin(held)
        chunk = held
      }
      if (entry.write(chunk)) done()
      else entry.once('drain', done)
    },
    final(done) {
      if (!flow) {
        begin(held)
        if (held.length) entry.write(held)
      }
      entry.end()
      flow!.then(() => done(), error => done(error as Error))
    },
    destroy(error, done) {
      entry.destroy(error ?? undefined)
      done(error)
    },
  })
  const done = new Promise<StoredFile>((resolve, reject) => {
    stream.once('finish', () => resolve(counted()))
    stream.once('error', error => reject(asProblem(error)))
    stream.once('close', () => reject(new ProblemError(400, 'Upload cut off', 'The upload ended before the file was whole. Nothing was kept; send it again.')))
  })
  // Whoever awaits `done` learns of it; until then it must not count as unhandled.
  done.catch(() => undefined)
  return { stream, done, closed: async () => flow?.catch(() => undefined) }
}

/** Passes bytes on, counted and hashed; more than the limit is an error. */
function makeCounter(): { counter: Transform, counted: () => StoredFile } {
  const hash = createHash('sha256')
  let sizeBytes = 0
  const counter = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      sizeBytes += chunk.length
      if (sizeBytes > LOG_LIMIT_BYTES) return done(tooLarge())
      hash.update(chunk)
      done(null, chunk)
    },
  })
  return { counter, counted: () => ({ sha256: hash.digest('hex'), sizeBytes }) }
}

function tooLarge(): ProblemError {
  return new ProblemError(413, 'Log too large', 'A log may have at most 200 MB, uncompressed. Cut the recording into single outings and send them one by one.')
}

function asProblem(error: NodeJS.ErrnoException): Error {
  if (error instanceof ProblemError) return error
  if (error.code === 'ENOSPC') return new ProblemError(507, 'No room', 'The disk of the server is full. Nothing was kept; tell whoever runs it.')
  if (error.code?.startsWith('Z_')) return new ProblemError(422, 'Broken gzip', 'The file begins like gzip but cannot be unpacked; it may have been cut off. Send the original file.')
  return error
}

/** The first bytes of a log, for finding out what it is. */
export async function readLogHead(key: string, bytes: number): Promise<Buffer> {
  const file = await open(placeOf(key))
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(bytes), 0, bytes, 0)
    return buffer.subarray(0, bytesRead)
  }
  finally {
    await file.close()
  }
}

export function readLogFile(key: string): Readable {
  return createReadStream(placeOf(key), { highWaterMark: 1 << 20 })
}

export async function removeLogFile(key: string): Promise<void> {
  await rm(placeOf(key), { force: true })
}
