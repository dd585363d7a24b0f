import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import {
  endProcess, isAlive, readPidFile, startTicks, takeLock, writePidFile,
} from '../../../../scripts/lib/processes.mjs'

let folder: string, child: ChildProcess | undefined

function start(code = 'setInterval(() => {}, 1000)'): Promise<number> {
  return new Promise((resolve) => {
    child = spawn(process.execPath, ['-e', `${code};console.log('up')`, 'some-word'], { stdio: ['ignore', 'pipe', 'inherit'] })
    child.stdout!.once('data', () => resolve(child!.pid!))
  })
}

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'lapwright-pid-'))
})
afterEach(() => {
  child?.kill('SIGKILL')
  rmSync(folder, { recursive: true, force: true })
})

describe('pid files', () => {
  it('find the process again, with what was noted', async () => {
    const file = join(folder, 'a.json'), pid = await start()
    writePidFile(file, pid, { edition: 'e' })
    expect(readPidFile(file, 'some-word')).toMatchObject({ pid, edition: 'e' })
  })

  it('do not take another program for it', async () => {
    const file = join(folder, 'a.json'), pid = await start()
    writePidFile(file, pid)
    expect(readPidFile(file, 'other-word')).toBeNull()
  })

  it('do not take a later process of the same number for it', async () => {
    const file = join(folder, 'a.json'), pid = await start()
    writeFileSync(file, JSON.stringify({ pid, started: `${Number(startTicks(pid)) - 1}` }))
    expect(readPidFile(file, 'some-word')).toBeNull()
  })

  it('say nothing when missing, broken, or of a process that has ended', async () => {
    const file = join(folder, 'a.json')
    expect(readPidFile(file, 'some-word')).toBeNull()
    writeFileSync(file, 'not json')
    expect(readPidFile(file, 'some-word')).toBeNull()
    const pid = await start()
    writePidFile(file, pid)
    await endProcess(pid)
    expect(readPidFile(file, 'some-word')).toBeNull()
  })
})

describe('endProcess', () => {
  it('ends a process that will not listen', async () => {
    const pid = await start('process.on("SIGTERM", () => {}); setInterval(() => {}, 1000)')
    await endProcess(pid, 200)
    expect(isAlive(pid)).toBe(false)
  })
})

describe('takeLock', () => {
  it('is ours when free, or when its holder is gone', () => {
    const file = join(folder, 'lock')
    writeFileSync(file, JSON.stringify({ pid: 999_999_999, started: '1' }))
    expect(takeLock(file, 'node')).toBe(0)
    expect(JSON.parse(readFileSync(file, 'utf8')).pid).toBe(process.pid)
  })

  it('names the process that holds it', async () => {
    const file = join(folder, 'lock'), pid = await start()
    writePidFile(file, pid)
    expect(takeLock(file, 'some-word')).toBe(pid)
  })
})
