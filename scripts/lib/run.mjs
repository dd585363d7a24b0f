// Running other programs quietly.
import { spawn } from 'node:child_process'
import { appendFileSync, closeSync, openSync } from 'node:fs'

/** Texts that a program printed are kept up to this length from their end: enough for its last words. */
const KEPT_CHARS = 4_000_000

/** The environment without npm's own variables, so that programs behave as if started by hand. */
export function plainEnv(extra = {}) {
  const env = {}
  for (const [name, value] of Object.entries(process.env)) {
    if (!/^npm_/i.test(name) && name !== 'INIT_CWD') env[name] = value
  }
  return { ...env, ...extra }
}

const running = new Set()

/** Ask every program that `run` has started to end. */
export function endRunning() {
  for (const child of running) child.kill('SIGTERM')
}

/**
 * Run a program to its end.
 * @param options.input text for its standard input (closed otherwise)
 * @param options.log file that gets all it prints
 * @param options.show true: it prints to the person's terminal, and reads there with options.terminal
 * @returns {Promise<{code: number, out: string, all: string}>} code 127 when the program is not there
 */
export function run(command, args, options = {}) {
  const { cwd, env = plainEnv(), input, log, show = false } = options
  const stdio = show
    ? [options.terminal ? 'inherit' : 'ignore', 'inherit', 'inherit']
    : [input === undefined ? 'ignore' : 'pipe', 'pipe', 'pipe']
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd, env, stdio })
    running.add(child)
    let out = '', all = '', logError
    const take = (text, isOut) => {
      if (isOut) out = (out + text).slice(-KEPT_CHARS)
      all = (all + text).slice(-KEPT_CHARS)
      if (!log || logError) return
      try {
        appendFileSync(log, text)
      }
      catch (error) {
        logError = error
      }
    }
    child.stdout?.setEncoding('utf8').on('data', text => take(text, true))
    child.stderr?.setEncoding('utf8').on('data', text => take(text, false))
    child.stdin?.on('error', () => {})
    if (input !== undefined) child.stdin?.end(input)
    child.on('error', (error) => {
      if (error.code === 'ENOENT') resolve({ code: 127, out, all: `${command}: not found` })
      else reject(error)
    })
    child.on('close', (code, signal) => {
      running.delete(child)
      if (logError?.code === 'ENOSPC') reject(logError)
      else resolve({ code: code ?? (signal === 'SIGINT' ? 130 : 143), out, all })
    })
  })
}

/** True when a program of this name can be started. */
export async function hasProgram(name) {
  return (await run('sh', ['-c', `command -v ${name}`])).code === 0
}

/**
 * Start a program that goes on after this process has ended.
 * @returns {number} its process id
 */
export function startDetached(command, args, { cwd, env, log }) {
  const file = openSync(log, 'a')
  try {
    const child = spawn(command, args, { cwd, env, detached: true, stdio: ['ignore', file, file] })
    // A failure to start shows as a process that is not there when its health is asked.
    child.on('error', () => {})
    child.unref()
    return child.pid
  }
  finally {
    closeSync(file)
  }
}
