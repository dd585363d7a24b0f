import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import process from 'node:process'
import { setTimeout as sleep } from 'node:timers/promises'
import { fileURLToPath } from 'node:url'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { freePorts } from '../../../scripts/lib/ports.mjs'
import { isAlive } from '../../../scripts/lib/processes.mjs'

const KEEPER = fileURLToPath(new URL('../../../scripts/keep.mjs', import.meta.url))
const LISTENS = `const server = require('node:http').createServer((_, answer) => answer.end(String(process.pid)))
server.on('error', (error) => { console.log('Port taken: ' + error.code); process.exit(1) })
server.listen(Number(process.env.NITRO_PORT), '127.0.0.1')`

let folder: string, keeper: ChildProcess, said: string, port: number

function keep(code: string) {
  const entry = join(folder, 'entry.cjs')
  writeFileSync(entry, code)
  said = ''
  keeper = spawn(process.execPath, [KEEPER, entry], { env: { ...process.env, NITRO_PORT: String(port) } })
  keeper.stdout!.on('data', text => (said += text))
  keeper.stderr!.on('data', text => (said += text))
  return new Promise<number | null>(resolve => keeper.once('exit', resolve))
}

/** The process that answers, when it is another than `but`. */
async function answering(but = 0): Promise<number> {
  for (const until = Date.now() + 20_000; Date.now() < until; await sleep(50)) {
    const pid = Number(await fetch(`http://127.0.0.1:${port}/`).then(answer => answer.text(), () => 0))
    if (pid && pid !== but) return pid
  }
  throw new Error(`nobody answered; ${said}`)
}

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'lapwright-keep-'));
  [port] = await freePorts(1) as [number]
})
afterEach(() => {
  keeper.kill('SIGKILL')
  rmSync(folder, { recursive: true, force: true })
})

describe('the keeper', { timeout: 60_000 }, () => {
  it('starts a process again that was killed or ended by itself, with growing pauses, and says so', async () => {
    void keep(LISTENS)
    const first = await answering()
    // Long enough for the keeper to have seen it listen.
    await sleep(500)
    process.kill(first, 'SIGKILL')
    const second = await answering(first)
    expect(second).not.toBe(first)
    process.kill(second, 'SIGTERM')
    await answering(second)
    expect(said).toMatch(/keeper: .* ended \(SIGKILL\); it is started again in 0\.5 s\n.*ended \(SIGTERM\); it is started again in 1 s/)
  })

  it('passes the wish to end on, and ends with its process', async () => {
    const ended = keep(`process.on('SIGTERM', () => { console.log('tidied up'); process.exit(0) });${LISTENS}`)
    const pid = await answering()
    keeper.kill('SIGTERM')
    expect(await ended).toBe(0)
    expect(isAlive(pid)).toBe(false)
    expect(said).toBe('tidied up\n')
  })

  it('ends with a process that cannot start, without trying again', async () => {
    const other = createServer().listen(port, '127.0.0.1')
    await new Promise(resolve => other.once('listening', resolve))
    expect(await keep(LISTENS)).toBe(1)
    expect(said).toBe('Port taken: EADDRINUSE\n')
    await new Promise(resolve => other.close(resolve))
    expect(await keep('console.log("wrong setting"); process.exit(1)')).toBe(1)
  })

  it('does not give up when the port is taken after the process has stood', async () => {
    writeFileSync(join(folder, 'count'), '')
    void keep(`const { appendFileSync, readFileSync } = require('node:fs')
      appendFileSync(${JSON.stringify(join(folder, 'count'))}, 'x')
      if (readFileSync(${JSON.stringify(join(folder, 'count'))}).length === 2) process.exit(1)
      ${LISTENS}`)
    const first = await answering()
    await sleep(500)
    process.kill(first, 'SIGKILL')
    await answering(first)
    expect(readFileSync(join(folder, 'count'), 'utf8')).toBe('xxx')
    expect(said).toMatch(/ended \(exit code 1\); it is started again in 1 s/)
  })
})
