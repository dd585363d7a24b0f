import { getRequestHeader, type H3Event } from 'h3'
import { ProblemError } from './problems'

const LIMIT_BYTES = 1_000_000

/**
 * The JSON body of a request, never more than a megabyte of it.
 * @throws {ProblemError} 413 too long, 415 not JSON, 400 broken JSON
 */
export async function readJson(event: H3Event): Promise<unknown> {
  if (!/^application\/json\b/i.test(getRequestHeader(event, 'content-type') ?? '')) {
    throw new ProblemError(415, 'JSON expected', 'The body must be JSON, sent with content-type application/json.')
  }
  const text = await readText(event)
  try {
    return JSON.parse(text)
  }
  catch {
    throw new ProblemError(400, 'Broken JSON', 'The body is not valid JSON.')
  }
}

async function readText(event: H3Event): Promise<string> {
  // A request made inside the server (while a page is rendered) carries its body here and has no stream.
  const given = (event.node.req as { body?: unknown }).body
  if (given !== undefined) return typeof given === 'string' ? given : JSON.stringify(given)
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of event.node.req) {
    bytes += (chunk as Buffer).length
    if (bytes <= LIMIT_BYTES) chunks.push(chunk as Buffer)
  }
  if (bytes > LIMIT_BYTES) throw new ProblemError(413, 'Too long', 'The body may be at most one megabyte.')
  return Buffer.concat(chunks).toString('utf8')
}
