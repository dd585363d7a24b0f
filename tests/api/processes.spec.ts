import { spawn, type ChildProcess } from 'node:child_process'
import { createServer, type AddressInfo } from 'node:net'
import path from 'node:path'
import process from 'node:process'
import { afterEach, describe, expect, it } from 'vitest'
import { waitFor } from '../../seeds/client'

const started: ChildProcess[] = []

afterEach(() => {
  for (const child of started.splice(0)) child.kill('SIGKILL')
})

async function freePort(): Promise<number> {
  const server = createServer()
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as AddressInfo
  await new Promise(resolve => server.close(resolve))
  return port
}

/** A process of the build under test, with what it says. */
function start(port: number, env: Record<string, string>) {
  const child = spawn(process.execPath, [path.join(process.env.LAPWRIGHT_OUTPUT_DIR!, 'server/index.mjs')], {
    env: {
      ...process.env,
      NODE_ENV: 'production',
      NITRO_HOST: '127.0.0.1',
      NITRO_PORT: String(port),
      NITRO_SHUTDOWN_TIMEOUT: '4000',
      NUXT_SESSION_PASSWORD: 'p'.repeat(40),
      ...env,
    },
  })
  started.push(child)
  let text = ''
  child.stdout.on('data', chunk => (text += chunk))
  child.stderr.on('data', chunk => (text += chunk))
  return { child, said: () => text, ended: new Promise<number | null>(resolve => child.once('exit', resolve)) }
}

const health = (port: number) => fetch(`http://127.0.0.1:${port}/api/health`).catch(() => null)

describe('a process', () => {
  it('that is a worker answers for its health and nothing else', async () => {
    const port = await freePort()
    start(port, { LAPWRIGHT_ROLES: 'worker' })
    const answer = await waitFor('the worker', async () => await health(port))
    expect(await answer.json()).toMatchObject({ ok: true, roles: ['worker'] })
    expect((await fetch(`http://127.0.0.1:${port}/sign-in`)).status).toBe(404)
  })

  it('whose port is taken says so and ends', async () => {
    const port = await freePort()
    start(port, { LAPWRIGHT_ROLES: 'web' })
    await waitFor('the first', async () => (await health(port))?.ok)
    const second = start(port, { LAPWRIGHT_ROLES: 'web' })
    expect(await second.ended).toBe(1)
    expect(second.said()).toContain(`Port ${port} is taken by another program.`)
  })

  it('ends within five seconds when it is told to', async () => {
    const port = await freePort()
    const { child, ended } = start(port, { LAPWRIGHT_ROLES: 'web,worker' })
    await waitFor('the process', async () => (await health(port))?.ok)
    const before = Date.now()
    child.kill('SIGTERM')
    await ended
    // The promise of the architecture: streams are closed, nothing is waited for longer than this.
    expect(Date.now() - before).toBeLessThan(5000)
  })

  it('lets map tiles through its content security policy when it has an address for them, and none otherwise', async () => {
    const policy = async (env: Record<string, string>) => {
      const port = await freePort()
      start(port, { LAPWRIGHT_ROLES: 'web', ...env })
      await waitFor('the server', async () => (await health(port))?.ok)
      const response = await fetch(`http://127.0.0.1:${port}/sign-in`)
      return response.headers.get('content-security-policy')!.split(';').find(part => part.trim().startsWith('img-src'))!.trim()
    }
    expect(await policy({})).toBe('img-src \'self\' data: blob:')
    expect(await policy({ NUXT_PUBLIC_TILE_URL: 'https://tiles.lapwright.example/{z}/{x}/{y}.png' }))
      .toBe('img-src \'self\' data: blob: https://tiles.lapwright.example')
  })
})
