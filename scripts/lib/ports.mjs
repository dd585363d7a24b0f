// Ports on the loopback interface.
import { readdirSync, readFileSync, readlinkSync } from 'node:fs'
import { createServer } from 'node:net'
import { fail } from './say.mjs'

const HOST = '127.0.0.1'

/** True when nothing listens on this port. */
export function portIsFree(port) {
  return new Promise((resolve) => {
    const server = createServer()
    server.once('error', () => resolve(false))
    server.listen({ port, host: HOST, exclusive: true }, () => server.close(() => resolve(true)))
  })
}

const LISTENING = '0A'

/** Whether this very process, and no other, listens on a port: its sockets are compared with the kernel's table. */
export function listensOn(pid, port) {
  try {
    const inodes = new Set(['tcp', 'tcp6'].flatMap(table => readFileSync(`/proc/${pid}/net/${table}`, 'utf8').split('\n'))
      .map(line => line.trim().split(/\s+/))
      .filter(([, local = '', , state]) => state === LISTENING && Number.parseInt(local.split(':')[1], 16) === port)
      .map(fields => `socket:[${fields[9]}]`))
    return inodes.size > 0 && readdirSync(`/proc/${pid}/fd`).some(fd => inodes.has(linkOf(`/proc/${pid}/fd/${fd}`)))
  }
  catch {
    return false
  }
}

function linkOf(path) {
  try {
    return readlinkSync(path)
  }
  catch {
    // Closed in the meantime.
    return ''
  }
}

/** Some ports that are free now and different from each other. */
export async function freePorts(count) {
  const servers = await Promise.all(Array.from({ length: count }, () => new Promise((resolve, reject) => {
    const server = createServer()
    server.once('error', reject)
    server.listen({ port: 0, host: HOST }, () => resolve(server))
  })))
  const ports = servers.map(server => server.address().port)
  await Promise.all(servers.map(server => new Promise(done => server.close(done))))
  return ports
}

/**
 * The port that a variable names.
 * @throws a sentence when it is no port
 */
export function portFrom(variable, text) {
  const port = Number(text)
  if (!Number.isInteger(port) || port < 1024 || port > 65535) {
    fail(`${variable}=${text} is not a port: give a number from 1024 to 65535.`)
  }
  return port
}

/** @throws a sentence naming the port and the variable that changes it */
export async function requireFree(port, variable, what) {
  if (await portIsFree(port)) return
  fail(`Port ${port} for ${what} is taken by another program: stop that program, `
    + `or choose another port, for example ${variable}=${port + 10} npm run up.`)
}
