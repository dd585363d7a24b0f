import type { Server } from 'node:http'
import type { Socket } from 'node:net'
import formidable, { errors as formidableErrors } from 'formidable'
import type { H3Event } from 'h3'
import { LOG_LIMIT_BYTES } from '../../shared/gzip'
import { openLogSink, type LogSink, type StoredFile } from './log-files'
import { ProblemError } from './problems'

/** How many bytes of a refused upload are read on, so that a browser comes to reading the answer. */
const DRAIN_BYTES = 2.2 * LOG_LIMIT_BYTES
/** An upload of which nothing came for so long is given up. */
const IDLE_MS = 60_000

export interface Upload extends StoredFile {
  fileName: string
}

/**
 * Takes the one file of a multipart request to storage, never whole in memory.
 * @throws {ProblemError} 400 no or several files, or cut off; 413 too large; 415 not multipart
 */
export async function receiveLog(event: H3Event, storageKey: string): Promise<Upload> {
  if (!/^multipart\/form-data\b/i.test(event.node.req.headers['content-type'] ?? '')) {
    throw new ProblemError(415, 'A file expected', 'Send the log as multipart/form-data with one part named file.')
  }
  const sink = await openLogSink(storageKey)
  allowSlowUpload(event)
  let fileName: string | undefined
  const form = formidable({
    maxFiles: 1,
    maxFields: 10,
    maxFieldsSize: 10_000,
    maxFileSize: LOG_LIMIT_BYTES,
    maxTotalFileSize: LOG_LIMIT_BYTES,
    allowEmptyFiles: true,
    minFileSize: 0,
    filter: ({ name }) => name === 'file',
    fileWriteStreamHandler: (file) => {
      fileName = (file as unknown as { originalFilename: string | null } | undefined)?.originalFilename ?? 'log.csv'
      return sink.stream
    },
  })
  try {
    await form.parse(event.node.req)
    if (fileName === undefined) throw new ProblemError(400, 'No file', 'The request holds no part named file.')
    const stored = await sink.done
    return { ...stored, fileName: plainName(fileName) }
  }
  catch (error) {
    sink.stream.destroy()
    await sink.closed()
    const problem = await uploadProblem(error, sink)
    await drain(event)
    throw problem
  }
}

/**
 * Node ends every request after five minutes, which a paddock's line needs for 50 MB. An upload may take as long as
 * bytes keep coming.
 */
function allowSlowUpload(event: H3Event): void {
  const { server } = event.node.req.socket as Socket & { server?: Server }
  if (server) server.requestTimeout = 0
  event.node.req.setTimeout(IDLE_MS, () => event.node.req.destroy())
}

async function uploadProblem(error: unknown, sink: LogSink): Promise<unknown> {
  const { code } = error as { code?: number }
  if (code === formidableErrors.biggerThanMaxFileSize || code === formidableErrors.biggerThanTotalMaxFileSize) {
    return new ProblemError(413, 'Log too large', 'A log may have at most 200 MB. Cut the recording into single outings and send them one by one.')
  }
  if (code === formidableErrors.maxFilesExceeded) return new ProblemError(400, 'One file at a time', 'Send each log in a request of its own.')
  if (code === formidableErrors.aborted) return new ProblemError(400, 'Upload cut off', 'The upload ended before the file was whole. Nothing was kept; send it again.')
  if (typeof code === 'number' && code >= 1000) return new ProblemError(400, 'Broken upload', 'The multipart body could not be read. Send the file again.')
  if (error instanceof ProblemError) return error
  return sink.done.then(() => error, (reason: unknown) => reason)
}

/** Refuses an upload of which nothing was read yet, in a way that a browser can tell. */
export async function refuseUpload(event: H3Event, reason: unknown): Promise<never> {
  await drain(event)
  throw reason
}

/** Reads on what a browser is still sending: it shows an answer only after it could send all, or nearly. */
async function drain(event: H3Event): Promise<void> {
  const { req } = event.node
  if (req.readableEnded || req.destroyed) return
  await new Promise<void>((resolve) => {
    let bytes = 0
    const end = () => resolve()
    req.on('data', (chunk: Buffer) => {
      bytes += chunk.length
      if (bytes > DRAIN_BYTES) end()
    })
    req.once('end', end)
    req.once('close', end)
    req.once('error', end)
    req.resume()
  })
}

/** The name without folders, control characters and the .gz that the browser added. */
function plainName(name: string): string {
  const base = name.split(/[\\/]/).at(-1)!
  // eslint-disable-next-line no-control-regex
  return base.replace(/[\u0000-\u001F\u007F]/g, '').replace(/\.gz$/i, '').slice(0, 200) || 'log.csv'
}
