// Processes that outlive the command that started them, known by pid files.
import { readFileSync, rmSync, writeFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'

/** The words a process was started with, or an empty list when it is not there. */
export function commandOf(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').filter(Boolean)
  }
  catch {
    return []
  }
}

/** True when the process is there and not merely waiting to be collected. */
export function isAlive(pid) {
  try {
    // The state is the first word after the program's name, which may hold spaces and brackets itself.
    return !/^[ZX]/.test(readFileSync(`/proc/${pid}/stat`, 'utf8').replace(/^.*\) /s, ''))
  }
  catch {
    return false
  }
}

/** When the process started, in the kernel's ticks: with the pid, a name that is never used twice. */
export function startTicks(pid) {
  try {
    return readFileSync(`/proc/${pid}/stat`, 'utf8').replace(/^.*\) /s, '').split(' ')[19]
  }
  catch {
    return ''
  }
}

/** Note a process, with whatever tells later whether it is still the wanted one. */
export function writePidFile(file, pid, about = {}) {
  writeFileSync(file, `${JSON.stringify({ pid, started: startTicks(pid), ...about })}\n`)
}

/**
 * The process noted in a pid file, or null when it has ended, or when its number now belongs to another program.
 * @param word how one of the words of its command line must end
 */
export function readPidFile(file, word) {
  try {
    const noted = JSON.parse(readFileSync(file, 'utf8'))
    const same = isAlive(noted.pid) && startTicks(noted.pid) === noted.started
    return same && commandOf(noted.pid).some(each => each.endsWith(word)) ? noted : null
  }
  catch {
    return null
  }
}

/** Ask a process to end; after `patienceMs` it is ended. */
export async function endProcess(pid, patienceMs = 8000) {
  signal(pid, 'SIGTERM')
  for (let waited = 0; waited < patienceMs && isAlive(pid); waited += 50) await sleep(50)
  if (isAlive(pid)) signal(pid, 'SIGKILL')
  for (let waited = 0; waited < 2000 && isAlive(pid); waited += 50) await sleep(50)
}

function signal(pid, name) {
  try {
    process.kill(pid, name)
  }
  catch (error) {
    if (error.code !== 'ESRCH') throw error
  }
}

/**
 * Hold a lock for the life of this process.
 * @returns the pid of the other holder, or 0 when the lock is ours
 */
export function takeLock(file, word) {
  const other = readPidFile(file, word)
  if (other && other.pid !== process.pid) return other.pid
  writePidFile(file, process.pid)
  process.once('exit', () => {
    if (readPidFile(file, word)?.pid === process.pid) rmSync(file, { force: true })
  })
  return 0
}
