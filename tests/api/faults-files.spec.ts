import { randomBytes } from 'node:crypto'
import { readdirSync, readFileSync, writeFileSync } from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import process from 'node:process'
import { gzipSync } from 'node:zlib'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Day, Log, Outing } from '../../shared/schemas/days'
import { waitFor } from '../../seeds/client'
import { connect } from '../support/database'
import {
  baseUrl, confirmColumns, fixture, fixtureLines, garage, lapsOf, saveLines, settled, uploadAndRead, type Garage,
} from '../support/team'

let own: Garage
let owner: Knex

beforeAll(async () => {
  own = await garage()
  owner = connect('owner')
})

afterAll(() => owner.destroy())

const send = <T = Problem>(name: string, bytes: BlobPart) => own.client.upload<T>(`/api/outings/${own.outingId}/logs`, name, bytes)
const bytesOf = (buffer: Buffer) => new Uint8Array(buffer)

function storedFiles(): string[] {
  try {
    return readdirSync(path.join(process.env.LAPWRIGHT_STORAGE_DIR!, 'logs', own.teamId)).sort()
  }
  catch {
    return []
  }
}

/** Sends a file that cannot be used: refused in words, and neither a row nor a file is left of it. */
async function refused(name: string, bytes: BlobPart): Promise<{ status: number, detail: string }> {
  const before = [storedFiles(), await owner('logs').where('team_id', own.teamId).count()]
  const { status, body } = await send(name, bytes)
  expect([storedFiles(), await owner('logs').where('team_id', own.teamId).count()]).toEqual(before)
  return { status, detail: body.detail }
}

const HEADER = 'time (s),latitude,longitude,speed (m/s)'
const row = (i: number) => `${(i / 10).toFixed(1)},${(54.4 + i * 1e-5).toFixed(6)},-2.9,${10 + i % 5}`
const rows = (count: number) => Array.from({ length: count }, (_, i) => row(i))
const unique = () => `# ${randomBytes(8).toString('hex')}`

/** The most memory the web process has had since it was last asked, MB. */
function peakMb(): number {
  const keeper = JSON.parse(readFileSync(path.join(process.env.LAPWRIGHT_TEST_RUN_DIR!, 'web.json'), 'utf8')).pid as number
  const web = readFileSync(`/proc/${keeper}/task/${keeper}/children`, 'utf8').trim().split(' ')[0]
  const peak = Number(/VmHWM:\s+(\d+) kB/.exec(readFileSync(`/proc/${web}/status`, 'utf8'))![1]) / 1024
  writeFileSync(`/proc/${web}/clear_refs`, '5')
  return peak
}

describe('a file that cannot be used', () => {
  it.each([
    ['empty', '', /empty/],
    ['of words', 'It rained all day, and nobody went out.\nTomorrow, perhaps.\n', /time|latitude|column/i],
    ['of one huge line', 'x'.repeat(3_000_000), /line|row|heading|column/i],
    ['with more columns than a log may have', `${Array.from({ length: 5000 }, (_, i) => `c${i}`).join(',')}\n${'1,'.repeat(4999)}1\n`, /400|column/i],
  ])('%s is refused with what is wrong', async (_, text, reason) => {
    const { status, detail } = await refused('file.csv', text)
    expect({ status, detail }).toEqual({ status: 422, detail: expect.stringMatching(reason) as string })
    expect(detail.length).toBeGreaterThan(40)
  })

  it('a picture named .csv is called one', async () => {
    const { status, detail } = await refused('picture.csv', fixture('picture.csv'))
    expect([status, detail]).toEqual([422, expect.stringMatching(/picture|image/i)])
  })

  it('of 201 MB is refused with the limit and a way out', async () => {
    const megabyte = Buffer.alloc(1_000_000, `${row(1)}\n`)
    const { status, detail } = await refused('large.csv', new Blob(Array.from({ length: 201 }, () => megabyte)) as unknown as BlobPart)
    expect([status, detail]).toEqual([413, expect.stringMatching(/at most 200 MB.*one by one/)])
  }, 60_000)

  it('that unpacks to 2 GB is stopped at the limit, in bounded memory', async () => {
    const member = gzipSync(Buffer.alloc(50_000_000, `${row(1)}\n`), { level: 1 })
    const bomb = Buffer.concat(Array.from({ length: 40 }, () => member))
    peakMb()
    const before = peakMb()
    const { status, detail } = await refused('bomb.csv.gz', bytesOf(bomb))
    expect([status, detail]).toEqual([413, expect.stringMatching(/200 MB, uncompressed/)])
    // Far below what it stands for: the bytes go through, a piece at a time.
    expect(peakMb() - before).toBeLessThan(150)
  }, 60_000)

  it('of gzip that was cut off says so', async () => {
    const whole = gzipSync([unique(), HEADER, ...rows(3000)].join('\n'))
    const { status, detail } = await refused('cut.csv.gz', bytesOf(whole.subarray(0, whole.length / 2)))
    expect([status, detail]).toEqual([422, expect.stringMatching(/cut off.*original/)])
  })
})

describe('a connection that is cut in the middle of a file', () => {
  it('leaves neither a row nor a file behind', async () => {
    const state = async () => [storedFiles(), await owner('logs').where('team_id', own.teamId).count()] as const
    const before = await state()
    const { hostname, port } = new URL(baseUrl())
    const socket = net.connect(Number(port), hostname)
    socket.write(`POST /api/outings/${own.outingId}/logs HTTP/1.1\r\nhost: x\r\ncookie: ${own.client.cookie()}\r\n`
      + 'content-type: multipart/form-data; boundary=b\r\ncontent-length: 1000000\r\n\r\n'
      + '--b\r\ncontent-disposition: form-data; name="file"; filename="cut.csv"\r\ncontent-type: text/csv\r\n\r\n'
      + 'time,latitude,longitude\n'.repeat(1000))
    await waitFor('the half file', async () => storedFiles().length > before[0].length)
    socket.destroy()
    await waitFor('the leftovers to go', async () => JSON.stringify(await state()) === JSON.stringify(before), 10_000)
  })
})

describe('a file without a latitude', () => {
  it('waits for a person, who is told that one is missing, and nothing is queued', async () => {
    const lines = rows(50).map(text => text.split(',').toSpliced(1, 1).join(','))
    const { body: { id, status } } = await send<{ id: string, status: string }>('no-latitude.csv', `${unique()}\ntime (s),longitude,speed (m/s)\n${lines.join('\n')}\n`)
    expect(status).toBe('mapping')
    await expect(confirmColumns(own.client, id)).rejects.toThrow(/400.*no column is marked as latitude; laps need time, latitude and longitude/)
    expect((await own.client.must<Log>('GET', `/api/logs/${id}`)).status).toBe('mapping')
  })
})

/** Sends a file, takes its columns as guessed, and waits until the worker is done with it. */
async function read(name: string, lines: string[]): Promise<Log> {
  const { status, body } = await send<{ id: string, status: string, detail: string }>(name, `${lines.join('\n')}\n`)
  expect([status, body.detail]).toEqual([201, undefined])
  if (body.status === 'mapping') await confirmColumns(own.client, body.id)
  return settled(own.client, body.id)
}

describe('a file with faults in its rows', () => {
  it('is read without them, and the outing says how many there are', async () => {
    const lines = rows(400)
    lines[100] = lines[100]!.replace(/,\d+$/, ',fast')
    lines[101] = '10.1,nowhere,-2.9,12'
    lines[200] = 'the logger was restarted here'
    const log = await read('faulty.csv', [unique(), HEADER, ...lines])
    expect(log).toMatchObject({ status: 'no_lines', problem: null })
    expect(log.problems.map(problem => problem.row)).toEqual(expect.arrayContaining([103, 104, 203]))
    expect(log.rowProblems).toBeGreaterThanOrEqual(3)
    const { logs } = await own.client.must<Outing>('GET', `/api/outings/${own.outingId}`)
    expect(logs.find(each => each.id === log.id)).toMatchObject({ rowProblems: log.rowProblems })
  })

  it('whose one line is huge is read without it, or refused with the row', async () => {
    const lines = rows(400)
    lines[150] = `15.0,${'9'.repeat(30_000_000)},-2.9,12`
    const log = await read('huge-line.csv', [unique(), HEADER, ...lines])
    expect(['no_lines', 'refused']).toContain(log.status)
    expect([log.problem, ...log.problems].some(problem => problem?.row === 153)).toBe(true)
  }, 60_000)

  it('which is text where a clock should be is refused with the row, and stays on the list with the reason', async () => {
    const log = await read('words.csv', [unique(), HEADER, ...rows(40).map(text => text.replace(/^[^,]+/, 'noon'))])
    expect(log.status).toBe('refused')
    expect(log.problem!.message.length).toBeGreaterThan(20)
    const { outings } = await own.client.must<Day>('GET', `/api/days/${own.dayId}`)
    expect(outings[0]!.logs).toContainEqual(expect.objectContaining({ id: log.id, status: 'refused', problem: log.problem }))
  })

  it('or only a heading is refused, and stays on the list with the reason', async () => {
    const { status, body } = await send<{ id: string, status: string, detail: string }>('heading.csv', `${HEADER}\n`)
    if (status === 422) {
      expect(body.detail).toMatch(/row/)
      return
    }
    if (body.status === 'mapping') await confirmColumns(own.client, body.id)
    const log = await settled(own.client, body.id)
    expect(log).toMatchObject({ status: 'refused', problem: { message: expect.stringMatching(/row/) as string } })
  })
})

describe('two logs of one outing', () => {
  it('with the same laps count once: those of the log that was added first', async () => {
    const of = await garage()
    await saveLines(of, fixtureLines('harrow-fell-lines.geojson'))
    const text = fixture('harrow-fell.csv').toString()
    const first = await uploadAndRead(of, of.outingId, 'first.csv', text)
    const count = async () => {
      const { items: [day] } = await of.client.must<{ items: { timedLapCount: number }[] }>('GET', `/api/days?teamId=${of.teamId}`)
      return day!.timedLapCount
    }
    const alone = await count()
    expect(alone).toBeGreaterThan(5)
    const second = await uploadAndRead(of, of.outingId, 'second.csv', `# the other logger\n${text}`)
    const laps = await lapsOf(of, of.outingId)
    const timed = (id: string) => laps.filter(lap => lap.logId === id && lap.kind === 'timed')
    expect(timed(first.id).every(lap => !lap.flags.includes('repeated'))).toBe(true)
    expect(timed(second.id).length).toBe(timed(first.id).length)
    expect(timed(second.id).every(lap => lap.flags.includes('repeated'))).toBe(true)
    expect(await count()).toBe(alone)
    const { items } = await of.client.must<{ items: { id: string, isOutingBest: boolean }[] }>('GET', `/api/laps?teamId=${of.teamId}&layoutId=${of.layoutId}`)
    const best = items.filter(lap => lap.isOutingBest).map(lap => lap.id)
    expect(best.every(id => timed(first.id).some(lap => lap.id === id))).toBe(true)

    // Cut again they stay so; and they count when the first log is gone.
    const lines = fixtureLines('harrow-fell-lines.geojson')
    await saveLines(of, lines.slice(0, 1))
    await settled(of.client, second.id)
    expect(await count()).toBe(alone)
    await of.client.must('DELETE', `/api/logs/${first.id}`)
    expect((await lapsOf(of, of.outingId)).some(lap => lap.flags.includes('repeated'))).toBe(false)
    expect(await count()).toBe(alone)
  })
})
