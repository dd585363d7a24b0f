import { readdirSync } from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import process from 'node:process'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import { emptySheet } from '../../shared/schemas/setups'
import { baseUrl, fixture, fixtureLines, garage, saveLines, uploadAndRead, type Garage } from '../support/team'

let own: Garage
let logId: string

const outing = (of: Garage) => ({ layoutId: of.layoutId, carId: of.carId, setupId: of.setupId, driverId: of.me.id })
const remove = (what: string, id: string, query = '') => own.client.send<Problem>('DELETE', `/api/${what}/${id}${query}`)
const made = async (url: string, body: object) => (await own.client.must<{ id: string }>('POST', url, body)).id
const status = async (url: string) => (await own.client.send('GET', url)).status

function storedFiles(teamId: string): string[] {
  return readdirSync(path.join(process.env.LAPWRIGHT_STORAGE_DIR!, 'logs', teamId))
}

beforeAll(async () => {
  own = await garage()
  await saveLines(own, fixtureLines('harrow-fell-lines.geojson'))
  logId = (await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))).id
})

describe('what laps stand on', () => {
  it.each([
    ['layouts', (of: Garage) => of.layoutId, /^1 outing was driven on this layout, on 12 September 2026: move that outing to another layout or remove it first\.$/],
    ['circuits', (of: Garage) => of.circuitId, /^1 track day was held at this circuit, on 12 September 2026: remove that day first\.$/],
    ['cars', (of: Garage) => of.carId, /^1 outing was driven in this car, on 12 September 2026: /],
    ['setups', (of: Garage) => of.setupId, /^1 outing was driven with this revision, on 12 September 2026: /],
    ['days', (of: Garage) => of.dayId, /^1 outing stands on this day: remove that outing first\.$/],
    ['outings', (of: Garage) => of.outingId, /^The log harrow-fell\.csv with \d+ laps belongs to this outing: remove the log first, or /],
  ])('is not removed: %s', async (what, id, words) => {
    const { status: refused, body } = await remove(what, id(own))
    expect(refused).toBe(409)
    expect(body.detail).toMatch(words)
    // The page that helps is there.
    expect(await status(`/api${body.see}`)).toBe(200)
    expect(await status(`/api/${what}/${id(own)}`)).toBe(200)
    expect((await own.client.must<{ laps: unknown[] }>('GET', `/api/outings/${own.outingId}`)).laps.length).toBeGreaterThan(5)
  })

  it('is counted, and the last day named', async () => {
    const dayId = await made(`/api/days?teamId=${own.teamId}`, { circuitId: own.circuitId, date: '2026-10-03' })
    const outingId = await made(`/api/days/${dayId}/outings`, outing(own))
    const { body } = await remove('layouts', own.layoutId)
    expect(body.detail).toBe('2 outings were driven on this layout, the last on 3 October 2026: move those outings to another layout or remove them first.')
    expect(body.see).toBe(`/outings/${outingId}`)
    expect((await remove('outings', outingId)).status).toBe(204)
    expect((await remove('days', dayId)).status).toBe(204)
  })

  it('of a revision is also the one that was written from it', async () => {
    const baseId = await made(`/api/cars/${own.carId}/setups`, { name: 'Softer', sheet: emptySheet() })
    const nextId = await made(`/api/cars/${own.carId}/setups`, { name: 'Softer still', basedOnId: baseId, sheet: emptySheet() })
    const refused = await remove('setups', baseId)
    expect(refused).toMatchObject({ status: 409, body: { see: `/setups/${nextId}` } })
    expect(refused.body.detail).toMatch(/^Revision 3 is based on this one/)
    expect([(await remove('setups', nextId)).status, (await remove('setups', baseId)).status]).toEqual([204, 204])
  })
})

describe('what was made by mistake', () => {
  it('goes: a circuit with its layouts and their lines, a car with its sheets', async () => {
    const circuitId = await made(`/api/circuits?teamId=${own.teamId}`, { name: 'Tarn Moor', timeZone: 'UTC' })
    const layoutId = await made(`/api/circuits/${circuitId}/layouts`, { name: 'Full' })
    await saveLines({ ...own, layoutId }, fixtureLines('harrow-fell-lines.geojson'))
    const carId = await made(`/api/cars?teamId=${own.teamId}`, { name: 'Twice by mistake' })
    const setupId = await made(`/api/cars/${carId}/setups`, { name: 'Baseline', sheet: emptySheet() })
    expect([(await remove('circuits', circuitId)).status, (await remove('cars', carId)).status]).toEqual([204, 204])
    for (const url of [`/api/circuits/${circuitId}`, `/api/layouts/${layoutId}`, `/api/cars/${carId}`, `/api/setups/${setupId}`]) {
      expect(await status(url), url).toBe(404)
    }
    expect((await remove('cars', carId)).status).toBe(404)
  })

  it('and is used at the same moment either goes or stays, and nothing stands on air', async () => {
    for (let i = 0; i < 8; i++) {
      const dayId = await made(`/api/days?teamId=${own.teamId}`, { circuitId: own.circuitId, date: '2026-10-04' })
      const [added, removed] = await Promise.all([
        own.client.send<{ id: string }>('POST', `/api/days/${dayId}/outings`, outing(own)), remove('days', dayId),
      ])
      if (added.status === 201) {
        expect(removed.status).toBe(409)
        expect(await status(`/api/outings/${added.body.id}`)).toBe(200)
        await remove('outings', added.body.id)
        await remove('days', dayId)
      }
      else {
        expect([404, 409]).toContain(added.status)
        expect(removed.status).toBe(204)
      }
    }
  })
})

describe('an outing with its log', () => {
  it('goes when the log is named, with file and laps, and not when another is', async () => {
    expect((await remove('outings', own.outingId, `?withLog=${own.dayId}`)).status).toBe(409)
    expect((await remove('outings', own.outingId, '?withLog=nonsense')).status).toBe(400)
    expect(storedFiles(own.teamId)).toContain(logId)
    expect((await remove('outings', own.outingId, `?withLog=${own.dayId}&withLog=${logId}`)).status).toBe(204)
    expect(await status(`/api/logs/${logId}`)).toBe(404)
    expect(await status(`/api/outings/${own.outingId}`)).toBe(404)
    expect(storedFiles(own.teamId)).not.toContain(logId)
    const choices = await own.client.must<{ items: unknown[] }>('GET', `/api/laps?teamId=${own.teamId}&layoutId=${own.layoutId}`)
    expect(choices.items).toEqual([])
    // Nothing stands on the day any more.
    expect((await remove('days', own.dayId)).status).toBe(204)
  })

  it('cannot name a log of another team', async () => {
    const other = await garage()
    const { id } = await uploadAndRead(other, other.outingId, 'short-loop.csv', fixture('short-loop.csv'))
    const dayId = await made(`/api/days?teamId=${own.teamId}`, { circuitId: own.circuitId, date: '2026-10-05' })
    const outingId = await made(`/api/days/${dayId}/outings`, outing(own))
    expect((await remove('outings', outingId, `?withLog=${id}`)).status).toBe(204)
    expect((await other.client.send('GET', `/api/logs/${id}`)).status).toBe(200)
  })

  it('that is removed while its log is on the way keeps nothing, and says so', async () => {
    const dayId = await made(`/api/days?teamId=${own.teamId}`, { circuitId: own.circuitId, date: '2026-10-06' })
    const outingId = await made(`/api/days/${dayId}/outings`, outing(own))
    const before = storedFiles(own.teamId)
    const head = '--b\r\ncontent-disposition: form-data; name="file"; filename="late.csv"\r\ncontent-type: text/csv\r\n\r\n'
    const text = `# of a removed outing\n${fixture('short-loop.csv').toString()}`
    const tail = '\r\n--b--\r\n'
    const { hostname, port } = new URL(baseUrl())
    const answer = await new Promise<string>((resolve, reject) => {
      const socket = net.connect(Number(port), hostname, async () => {
        socket.write(`POST /api/outings/${outingId}/logs HTTP/1.1\r\nhost: x\r\nconnection: close\r\ncookie: ${own.client.cookie()}\r\n`
          + `content-type: multipart/form-data; boundary=b\r\ncontent-length: ${Buffer.byteLength(head + text + tail)}\r\n\r\n${head}`)
        await new Promise(done => setTimeout(done, 500))
        expect((await remove('outings', outingId)).status).toBe(204)
        socket.write(text + tail)
      })
      let said = ''
      socket.on('data', chunk => (said += String(chunk)))
      socket.on('end', () => resolve(said))
      socket.on('error', reject)
    })
    expect(answer).toMatch(/^HTTP\/1\.1 409 /)
    expect(answer).toContain('The outing was removed in the meantime.')
    expect(storedFiles(own.teamId)).toEqual(before)
  })
})
