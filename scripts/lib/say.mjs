// What a person reads: calm lines, and one sentence when something stops the work.
import { appendFileSync, mkdirSync } from 'node:fs'
import { dirname } from 'node:path'

let stream = process.stdout

/** Where progress is printed: standard output, unless that belongs to a result. */
export function speakOn(other) {
  stream = other
}

/** Print one line of progress. */
export function say(line = '') {
  stream.write(`${line}\n`)
}

/**
 * Stop with a sentence for the person: what, why, what to do.
 * @throws always; `main` prints the sentence and ends with exit code 1
 */
export function fail(sentence) {
  throw Object.assign(new Error(sentence), { plain: true })
}

/** The sentence for an error; what nobody foresaw is described by its message and kept in `errorLog`. */
export function sentenceOf(error, errorLog) {
  if (error.plain) return error.message
  const where = error.path ? ` ${error.path}` : ''
  if (error.code === 'ENOSPC' || /no space left on device/i.test(error.message ?? '')) {
    return `The disk is full${where ? `, so${where} could not be written` : ''}: free about 2 GB and try again.`
  }
  if (error.code === 'EACCES' || error.code === 'EPERM') {
    return `Lapwright may not use${where || ' a file'}: `
      + 'run this as the user who owns the project folder, or give the folder to this user with chown.'
  }
  if (error.code === 'EROFS') return `${error.path} is read-only: put the project where it can be written.`
  const kept = keep(error, errorLog)
  return `Something unexpected stopped the work: ${String(error.message).split('\n')[0]}${kept}`
}

function keep(error, errorLog) {
  if (!errorLog) return ''
  try {
    mkdirSync(dirname(errorLog), { recursive: true })
    appendFileSync(errorLog, `${new Date().toISOString()} ${error.stack}\n`)
    return ` (details in ${errorLog})`
  }
  catch {
    return ''
  }
}

/** Run a command's work; any error becomes one sentence and exit code 1. */
export async function main(work, errorLog) {
  try {
    const code = await work()
    process.exit(typeof code === 'number' ? code : 0)
  }
  catch (error) {
    process.stderr.write(`${sentenceOf(error, errorLog)}\n`)
    process.exit(1)
  }
}
