import { randomBytes } from 'node:crypto'
import { readdirSync } from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import process from 'node:process'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Log, LogProgress, Outing } from '../../shared/schemas/days'
import { isAlive } from '../../scripts/lib/processes.mjs'
import { waitFor } from '../../seeds/client'
import { connect } from '../support/database'
import { begun, whileRead, type WithLog } from '../support/job-in-the-middle'
import { ownServers, type OwnServers } from '../support/own-servers'
import { confirmColumns, fixture, garage, lapsOf, settled } from '../support/team'

let own: OwnServers
let owner: Knex

beforeAll(async () => {
  own = await ownServers('api')
  owner = connect('owner')
}, 120_000)

afterAll(async () => {
  await owner?.destroy()
  await own?.stop()
})

/** The events of a log as a browser gets them: a stream that breaks is opened again. */
function follow({ client, logId }: WithLog) {
  const told: LogProgress[] = []
  let stopped = false
  const stop = new AbortController()
  const done = (async () => {
    while (!stopped) {
      try {
        const answer = await fetch(`${own.url}/api/logs/${logId}/events`, { headers: { cookie: client.cookie() }, signal: stop.signal })
        let text = ''
        for await (const chunk of answer.body as unknown as AsyncIterable<Uint8Array>) {
          text += Buffer.from(chunk).toString()
          const whole = text.split('\n\n')
          text = whole.pop()!
          for (const event of whole) {
            const data = /^data: (\{.*\})$/m.exec(event)?.[1]
            if (data && answer.ok) told.push(JSON.parse(data) as LogProgress)
          }
        }
      }
      catch {
        // Broken: opened again.
      }
      await new Promise(resolve => setTimeout(resolve, 300))
    }
  })()
  return {
    told,
    stop: () => {
      stopped = true
      stop.abort()
      return done
    },
  }
}

const timed = async (of: WithLog) => (await lapsOf(of, of.outingId)).filter(lap => lap.kind === 'timed').length

async function jobOf(logId: string): Promise<{ state: string, retry_count: number }> {
  const { rows: [job] } = await owner.raw('select state, retry_count from pgboss.job where name = \'log-read\' and data->>\'logId\' = ?', [logId])
  return job
}

describe('a worker that is killed in the middle of a job', () => {
  it('is started again, and its job begins again within seconds, which the page is told', async () => {
    const of = await begun()
    const events = follow(of)
    const lost = own.pidOf('worker')
    await whileRead(owner, of, async () => process.kill(lost, 'SIGKILL'))
    const killed = Date.now()
    expect(await settled(of.client, of.logId)).toMatchObject({ status: 'ready', problem: null })
    expect(Date.now() - killed).toBeLessThan(30_000)
    expect(await timed(of)).toBeGreaterThan(5)
    expect(await jobOf(of.logId)).toMatchObject({ state: 'completed', retry_count: 1 })
    expect(own.pidOf('worker')).not.toBe(lost)
    expect(own.said('worker')).toMatch(/keeper: .* ended \(SIGKILL\); it is started again in 0\.5 s/)
    await waitFor('the last event', async () => events.told.at(-1)?.status === 'ready')
    await events.stop()
    expect(events.told).toContainEqual({ logId: of.logId, status: 'queued', step: null, fraction: 0, restarted: true })
    expect(events.told.at(-1)!.restarted).toBeFalsy()
  }, 60_000)
})

describe('a job of which two workers think that it is theirs', () => {
  it('is stored by none but the later one: the storing transaction decides', async () => {
    const of = await begun()
    const job = () => owner('pgboss.job').where('name', 'log-read').whereRaw('data->>\'logId\' = ?', [of.logId])
    await whileRead(owner, of, async () => {
      // As if another worker had found it lost.
      await job().update({ state: 'retry', start_after: owner.raw('now() + interval \'1 hour\'') })
    })
    await waitFor('the first to give way', async () => own.said('worker').includes('another worker has it by now'), 20_000)
    expect(await lapsOf(of, of.outingId)).toEqual([])
    expect(await jobOf(of.logId)).toMatchObject({ state: 'retry' })
    await job().update({ start_after: owner.raw('now()') })
    expect(await settled(of.client, of.logId)).toMatchObject({ status: 'ready', problem: null })
    expect(await timed(of)).toBeGreaterThan(5)
  }, 60_000)

  it('stays as the second stored it, when the first wakes up again', async () => {
    const of = await garage()
    const { body: { id: logId } } = await of.client.upload<{ id: string }>(`/api/outings/${of.outingId}/logs`, 'long.csv', longLog())
    const sleeper = own.pidOf('worker')
    try {
      await confirmColumns(of.client, logId)
      await waitFor('the reading', async () => (await of.client.must<Log>('GET', `/api/logs/${logId}`)).status === 'processing')
      process.kill(sleeper, 'SIGSTOP')
      // The lock of a living worker goes with its connection; asleep, it cannot take it again.
      await own.breakConnections('lapwright holding')
      await own.startWorker()
      expect(await settled(of.client, logId)).toMatchObject({ status: 'no_lines', problem: null })
      const rows = async () => [
        await owner('logs').where('id', logId).first(owner.raw('xmin::text')),
        await owner('channels').where('log_id', logId).orderBy('name').select('name', owner.raw('xmin::text')),
      ]
      const before = await rows()
      process.kill(sleeper, 'SIGCONT')
      const next = await begun()
      await confirmColumns(next.client, next.logId)
      expect(await settled(next.client, next.logId)).toMatchObject({ status: 'ready' })
      await new Promise(resolve => setTimeout(resolve, 1500))
      expect(await rows()).toEqual(before)
      expect(await jobOf(logId)).toMatchObject({ state: 'completed', retry_count: 1 })
    }
    finally {
      process.kill(sleeper, 'SIGCONT')
    }
  }, 90_000)
})

/** A quarter of a million rows round a circle: what takes a worker a second or more. */
function longLog(): string {
  const rows = Array.from({ length: 250_000 }, (_, i) => {
    const angle = i / 2000
    return `${(i / 100).toFixed(2)},${(54.4 + 0.002 * Math.sin(angle)).toFixed(7)},${(-2.9 + 0.003 * Math.cos(angle)).toFixed(7)},20.0`
  })
  return `# ${randomBytes(8).toString('hex')}\ntime (s),latitude,longitude,speed (m/s)\n${rows.join('\n')}\n`
}

describe('a database that is restarted', () => {
  it('in the middle of a job: requests say when to try again, streams come back, and the job comes right', async () => {
    const of = await begun()
    const events = follow(of)
    const [web, worker] = [own.pidOf('web'), own.pidOf('worker')]
    await whileRead(owner, of, () => own.stopDatabase())
    for (const answer of [
      await of.client.send<Problem>('GET', `/api/outings/${of.outingId}`),
      await of.client.send<Problem>('POST', `/api/circuits?teamId=${of.teamId}`, { name: 'Typed', timeZone: 'UTC' }),
      await of.client.send<Problem>('POST', '/api/sign-in', { email: of.email, password: 'a long enough password' }),
    ]) {
      expect(answer.status).toBe(503)
      expect(answer.headers.get('retry-after')).toMatch(/^\d+$/)
      expect(answer.headers.get('content-type')).toMatch(/problem\+json/)
      expect(answer.body.detail).toMatch(/try again in some seconds/)
    }
    const page = await fetch(`${own.url}/days`, { headers: { cookie: of.client.cookie() }, redirect: 'manual' })
    expect(page.status).toBe(503)
    await own.startDatabase()
    const back = Date.now()
    await waitFor('the next request', async () => (await of.client.send('GET', `/api/outings/${of.outingId}`)).status === 200, 5000)
    expect((await fetch(`${own.url}/days`, { headers: { cookie: of.client.cookie() }, redirect: 'manual' })).status).toBe(200)
    expect(await settled(of.client, of.logId)).toMatchObject({ status: 'ready', problem: null })
    expect(Date.now() - back).toBeLessThan(30_000)
    expect(await timed(of)).toBeGreaterThan(5)
    await waitFor('the last event', async () => events.told.at(-1)?.status === 'ready')
    await events.stop()
    // Neither process had to be started again for it.
    expect([own.pidOf('web'), own.pidOf('worker')]).toEqual([web, worker])
  }, 90_000)
})

describe('a web process that is killed', () => {
  it('while an upload runs: it is started again, and the file can be sent again', async () => {
    const of = await garage()
    const lost = own.pidOf('web')
    const socket = net.connect(Number(new URL(own.url).port), '127.0.0.1')
    const broken = new Promise(resolve => socket.once('close', resolve))
    socket.on('error', () => undefined)
    socket.write(`POST /api/outings/${of.outingId}/logs HTTP/1.1\r\nhost: x\r\ncookie: ${of.client.cookie()}\r\n`
      + 'content-type: multipart/form-data; boundary=b\r\ncontent-length: 100000\r\n\r\n'
      + '--b\r\ncontent-disposition: form-data; name="file"; filename="cut.csv"\r\ncontent-type: text/csv\r\n\r\n' + 'time,latitude,longitude\n'.repeat(1000))
    await waitFor('the half file', async () => half(of.teamId).length === 1)
    process.kill(lost, 'SIGKILL')
    await broken
    const answered = await waitFor('the next web process', async () =>
      of.client.send<Outing>('GET', `/api/outings/${of.outingId}`).catch(() => null), 20_000)
    expect(answered.body.logs).toEqual([])
    const again = await of.client.upload(`/api/outings/${of.outingId}/logs`, 'cut.csv', fixture('short-loop.csv'))
    expect(again.status).toBe(201)
    expect(own.pidOf('web')).not.toBe(lost)
  }, 60_000)
})

describe('a keeper', () => {
  it('is left alone by a second start; killed, it takes its process with it, and the next start begins anew', async () => {
    const running = () => [own.keeperOf('web'), own.pidOf('web'), own.keeperOf('worker'), own.pidOf('worker')]
    const before = running()
    await own.ensure()
    expect(running()).toEqual(before)
    process.kill(own.keeperOf('worker'), 'SIGKILL')
    await waitFor('its process to end', async () => !isAlive(before[3]!), 10_000)
    await own.ensure()
    const after = running()
    expect(after.slice(0, 2)).toEqual(before.slice(0, 2))
    expect(isAlive(after[3]!) && after[3] !== before[3]).toBe(true)
  }, 60_000)
})

function half(teamId: string): string[] {
  try {
    return readdirSync(path.join(own.storage, 'logs', teamId))
  }
  catch {
    return []
  }
}
