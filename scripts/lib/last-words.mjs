// What a failed program said, cut down to the part that helps.

// eslint-disable-next-line no-control-regex
const COLOURS = /\u001B\[[0-9;?]*[A-Za-z]/g
const NOISE = /^(npm (error|ERR!)|error|ERROR|E:|FATAL:|\[[^\]]*\]|\s)+\s*/
const EMPTY = /^[\s{}()[\];,^~|─│╭╰╮╯-]*$/
const UNREACHABLE = new Set([
  'ENOTFOUND', 'EAI_AGAIN', 'ETIMEDOUT', 'ECONNREFUSED', 'ECONNRESET', 'ENETUNREACH', 'ERR_SOCKET_TIMEOUT', 'FETCH_ERROR',
])
const STACK = /^\s*(at |node:internal|Node\.js v\d|code: '|errno: |syscall: )/

function linesOf(text) {
  return text.replace(COLOURS, '').split(/\r?\n/).filter(line => !EMPTY.test(line) && !STACK.test(line))
}

function tidy(line) {
  const text = line.trim().replace(/[.:]+$/, '')
  return text.length > 200 ? `${text.slice(0, 197)}...` : text
}

/** True when the text tells of a full disk. */
export function tellsDiskFull(text) {
  return /ENOSPC|no space left on device|enough free space/i.test(text)
}

/** The last line that says something; lines that name an error come before lines that do not. */
export function lastWords(text) {
  const lines = linesOf(text)
  const named = lines.filter(line => /error|fatal|fail|cannot|could not|refused|denied|in use/i.test(line))
  return tidy((named.at(-1) ?? lines.at(-1) ?? 'it said nothing').replace(/^\s*(ERROR|error):?\s+/, ''))
}

/** Why npm failed, in a few words, from what it printed. */
export function npmReason(text) {
  if (tellsDiskFull(text)) return 'the disk is full'
  const code = /npm (?:error|ERR!) code (\w+)/.exec(text)?.[1]
  if (UNREACHABLE.has(code)) {
    return `the package registry could not be reached (${code})`
  }
  if (code === 'EUSAGE') return 'package.json and package-lock.json do not agree'
  const words = linesOf(text)
    .filter(line => /^npm (error|ERR!)/.test(line))
    .filter(line => !/^npm (error|ERR!) (code|errno|syscall|path|dest|A complete log|\s*$)/.test(line))
    .map(line => line.replace(NOISE, ''))
  return tidy(words[0] ?? lastWords(text))
}

/** Why apt-get failed, in a few words, from what it printed. */
export function aptReason(text) {
  if (tellsDiskFull(text)) return 'the disk is full'
  // apt-get tells of an archive it cannot reach as a warning, and then misses the package.
  if (/failed to fetch|could not resolve|could not connect|unable to connect/i.test(text)) {
    return 'the Debian archive could not be reached'
  }
  const words = linesOf(text).filter(line => /^E: /.test(line)).map(line => line.slice(3))
  return tidy(words[0] ?? lastWords(text))
}
