import { createServer, type Server } from 'node:net'
import { afterEach, describe, expect, it } from 'vitest'
import { freePorts, portFrom, portIsFree, requireFree } from '../../../../scripts/lib/ports.mjs'

let server: Server | undefined

function listen(port: number): Promise<void> {
  return new Promise((resolve) => {
    server = createServer().listen(port, '127.0.0.1', () => resolve())
  })
}

afterEach(() => new Promise<void>((resolve) => {
  if (server?.listening) server.close(() => resolve())
  else resolve()
}))

describe('ports', () => {
  it('gives different free ports', async () => {
    const ports = await freePorts(3)
    expect(new Set(ports).size).toBe(3)
    expect(await portIsFree(ports[0])).toBe(true)
  })

  it('sees that a port is taken, and says which and what to set', async () => {
    const [port] = await freePorts(1)
    await listen(port)
    expect(await portIsFree(port)).toBe(false)
    await expect(requireFree(port, 'LAPWRIGHT_PORT', 'the web server'))
      .rejects.toThrow(new RegExp(`^Port ${port} for the web server is taken.*LAPWRIGHT_PORT=${port + 10} `))
  })

  it('reads a port as a number', () => {
    expect(portFrom('LAPWRIGHT_PORT', '3100')).toBe(3100)
  })
})
