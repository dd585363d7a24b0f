import { createHash, randomBytes } from 'node:crypto'
import { readdirSync } from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import process from 'node:process'
import { gzipSync } from 'node:zlib'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Log, LogProgress } from '../../shared/schemas/days'
import { waitFor } from '../../seeds/client'
import { baseUrl, confirmColumns, fixture, garage, settled, uploadAndRead, type Garage } from '../support/team'

const csv = fixture('short-loop.csv')
let own: Garage

beforeAll(async () => {
  own = await garage()
})

const upload = <T = Problem>(name: string, bytes: BlobPart, to = own) => to.client.upload<T>(`/api/outings/${to.outingId}/logs`, name, bytes)

function storedFiles(teamId: string): string[] {
  try {
    return readdirSync(path.join(process.env.LAPWRIGHT_STORAGE_DIR!, 'logs', teamId))
  }
  catch {
    return []
  }
}

/** A variant of the fixture that is another file to the server. */
function variant(): string {
  return `# ${randomBytes(8).toString('hex')}\n${csv.toString()}`
}

describe('an upload', () => {
  it('is found out, waits for its columns, is read, and is remembered for the next file of the same header', async () => {
    const fresh = await garage()
    const first = await upload<{ id: string, status: string }>('first.csv', csv, fresh)
    expect(first).toMatchObject({ status: 201, body: { status: 'mapping' } })
    const found = await fresh.client.must<Log>('GET', `/api/logs/${first.body.id}`)
    expect(found.sha256).toBe(createHash('sha256').update(csv).digest('hex'))
    expect(found.sizeBytes).toBe(csv.length)
    expect(found.preview!.columns.map(column => column.channel)).toEqual(expect.arrayContaining(['time', 'latitude', 'longitude', 'speed']))
    await confirmColumns(fresh.client, first.body.id)
    expect(await settled(fresh.client, first.body.id)).toMatchObject({ status: 'no_lines', problem: null, remembered: false })

    const second = await upload<{ id: string, status: string }>('second.csv', `${csv.toString()}\n`, fresh)
    expect(second).toMatchObject({ status: 201, body: { status: 'queued' } })
    expect(await settled(fresh.client, second.body.id)).toMatchObject({ status: 'no_lines', remembered: true })
  })

  it('is kept uncompressed under the hash of its own bytes, gzip or not', async () => {
    const text = variant()
    const zipped = await upload<{ id: string }>('zipped.csv.gz', new Uint8Array(gzipSync(text)))
    expect(zipped.status).toBe(201)
    const log = await own.client.must<Log>('GET', `/api/logs/${zipped.body.id}`)
    expect(log).toMatchObject({ fileName: 'zipped.csv', sizeBytes: Buffer.byteLength(text), sha256: createHash('sha256').update(text).digest('hex') })
    const plain = await upload('plain.csv', text)
    expect(plain.status).toBe(409)
    expect(plain.body.see).toBe(`/logs/${zipped.body.id}`)
  })

  it('of the same bytes is welcome in another team', async () => {
    const text = variant()
    const other = await garage()
    expect((await upload('a.csv', text)).status).toBe(201)
    expect((await upload('a.csv', text, other)).status).toBe(201)
  })

  it('of two tabs at the same moment goes through once', async () => {
    const text = variant()
    const answers = await Promise.all([upload('a.csv', text), upload('b.csv', text)])
    expect(answers.map(answer => answer.status).sort()).toEqual([201, 409])
  })

  it.each([
    ['picture.csv', /picture|image|PNG/i],
    ['empty.csv', /empty/i],
  ])('of %s is refused with a reason, and nothing is kept', async (name, reason) => {
    const before = storedFiles(own.teamId)
    const { status, body } = await upload(name, fixture(name))
    expect(status).toBe(422)
    expect(body.detail).toMatch(reason)
    expect(storedFiles(own.teamId)).toEqual(before)
  })

  it('that is not a form, or holds no file, is refused', async () => {
    expect((await own.client.send('POST', `/api/outings/${own.outingId}/logs`, {})).status).toBe(415)
    const form = new FormData()
    form.append('other', 'x')
    const answer = await fetch(`${baseUrl()}/api/outings/${own.outingId}/logs`, { method: 'POST', body: form, headers: { cookie: own.client.cookie() } })
    expect(answer.status).toBe(400)
  })

  it('that unpacks to more than 200 MB is stopped at the limit', async () => {
    const before = storedFiles(own.teamId)
    const line = 'time,latitude,longitude\n' + '1,2,3\n'.repeat(1000)
    const bomb = gzipSync(Buffer.alloc(201_000_000, line), { level: 1 })
    const { status, body } = await upload('bomb.csv.gz', new Uint8Array(bomb))
    expect(status).toBe(413)
    expect(body.detail).toMatch(/200 MB/)
    expect(storedFiles(own.teamId)).toEqual(before)
  })

  it('of broken gzip says so', async () => {
    const whole = gzipSync(variant())
    const { status, body } = await upload('cut.csv.gz', new Uint8Array(whole.subarray(0, whole.length - 40)))
    expect(status).toBe(422)
    expect(body.title).toMatch(/gzip/)
  })

  it('that is cut off leaves nothing behind', async () => {
    const before = storedFiles(own.teamId)
    const { hostname, port } = new URL(baseUrl())
    await new Promise<void>((resolve, reject) => {
      const socket = net.connect(Number(port), hostname, () => {
        socket.write(`POST /api/outings/${own.outingId}/logs HTTP/1.1\r\nhost: x\r\ncookie: ${own.client.cookie()}\r\n`
          + 'content-type: multipart/form-data; boundary=b\r\ncontent-length: 100000\r\n\r\n'
          + '--b\r\ncontent-disposition: form-data; name="file"; filename="cut.csv"\r\ncontent-type: text/csv\r\n\r\n'
          + 'time,latitude,longitude\n'.repeat(50), () => setTimeout(() => {
          socket.destroy()
          resolve()
        }, 300))
      })
      socket.on('error', reject)
    })
    await waitFor('the leftovers to go', async () => storedFiles(own.teamId).length === before.length)
    expect(storedFiles(own.teamId)).toEqual(before)
  })
})

describe('the columns of a log', () => {
  it('must hold time and position, each once', async () => {
    const { body: { id } } = await upload<{ id: string }>('columns.csv', variant())
    const { preview } = await own.client.must<Log>('GET', `/api/logs/${id}`)
    const columns = preview!.columns.map(({ index, source, channel, unit }) => ({ index, source, channel: channel === 'latitude' ? null : channel, unit }))
    const { status, body } = await own.client.send<Problem>('PUT', `/api/logs/${id}/columns`, { columns })
    expect(status).toBe(400)
    expect(body.detail).toMatch(/latitude/)
    const foreign = await own.client.send<Problem>('PUT', `/api/logs/${id}/columns`, {
      columns: preview!.columns.map(({ index, channel, unit }) => ({ index, source: 'not of this file', channel, unit })),
    })
    expect(foreign.status).toBe(422)
  })

  it('taken wrongly make a log that says why it was refused, and can be put right', async () => {
    const { body: { id } } = await upload<{ id: string }>('wrong.csv', variant())
    const { preview } = await own.client.must<Log>('GET', `/api/logs/${id}`)
    const right = preview!.columns.map(({ index, source, channel, unit }) => ({ index, source, channel, unit }))
    // The speed of the loop is steady: taken for the time, the clock stands still.
    const wrong = right.map(column => ({
      ...column,
      ...(column.channel === 'speed' ? { channel: 'time', unit: 's' } : column.channel === 'time' ? { channel: null, unit: '' } : {}),
    }))
    await own.client.must('PUT', `/api/logs/${id}/columns`, { columns: wrong })
    const refused = await settled(own.client, id)
    expect(refused).toMatchObject({ status: 'refused' })
    expect(refused.problem!.message.length).toBeGreaterThan(20)
    await own.client.must('PUT', `/api/logs/${id}/columns`, { columns: right })
    expect(await settled(own.client, id)).toMatchObject({ status: 'no_lines', problem: null })
  })
})

describe('a log', () => {
  it('tells its progress as events: how it stands first, ready at last', async () => {
    const fresh = await garage()
    const { body: { id } } = await upload<{ id: string }>('long.csv', fixture('harrow-fell.csv'), fresh)
    const stop = new AbortController()
    const response = await fetch(`${baseUrl()}/api/logs/${id}/events`, { headers: { cookie: fresh.client.cookie() }, signal: stop.signal })
    expect(response.headers.get('content-type')).toMatch(/text\/event-stream/)
    const told: LogProgress[] = []
    const reading = (async () => {
      let text = ''
      for await (const chunk of response.body as unknown as AsyncIterable<Uint8Array>) {
        text += Buffer.from(chunk).toString()
        told.splice(0, told.length, ...text.split('\n').filter(line => line.startsWith('data:') && line.endsWith('}')).map(line => JSON.parse(line.slice(5)) as LogProgress))
      }
    })().catch(() => undefined)
    await waitFor('the first event', async () => told.length)
    expect(told[0]).toMatchObject({ logId: id, status: 'mapping' })
    await confirmColumns(fresh.client, id)
    await waitFor('the last event', async () => told.at(-1)?.status === 'no_lines')
    stop.abort()
    await reading
    const fractions = told.filter(item => item.status === 'processing').map(item => item.fraction)
    expect(fractions.length).toBeGreaterThan(1)
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b))
  })

  it('goes with its file, channels and laps', async () => {
    const log = await uploadAndRead(own, own.outingId, 'gone.csv', variant())
    expect(storedFiles(own.teamId)).toContain(log.id)
    expect((await own.client.send('DELETE', `/api/logs/${log.id}`)).status).toBe(204)
    expect((await own.client.send('GET', `/api/logs/${log.id}`)).status).toBe(404)
    expect(storedFiles(own.teamId)).not.toContain(log.id)
  })

  it('has a trace of a few thousand points within its path', async () => {
    const log = await uploadAndRead(own, own.outingId, 'trace.csv', variant())
    const trace = await own.client.must<{ timeS: number[], latitudeDeg: number[], longitudeDeg: number[] }>('GET', `/api/logs/${log.id}/trace`)
    expect(trace.timeS.length).toBe(trace.latitudeDeg.length)
    expect(trace.timeS.length).toBeGreaterThan(50)
    expect(trace.timeS.length).toBeLessThanOrEqual(6000)
  })
})
