import { beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { LineTrial } from '../../shared/schemas/circuits'
import type { Comparison } from '../../shared/schemas/compare'
import type { LapChoice, Log, Outing } from '../../shared/schemas/days'
import type { Setup } from '../../shared/schemas/setups'
import { demoLogs } from '../../seeds/harrow-fell/demo-logs'
import { waitFor } from '../../seeds/client'
import { fixture, fixtureLines, garage, lapsOf, saveLines, uploadAndRead, type Garage } from '../support/team'

const lines = fixtureLines('harrow-fell-lines.geojson')
let own: Garage
let log: Log

beforeAll(async () => {
  own = await garage()
  log = await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
})

const ready = () => waitFor('the cut', async () => (await own.client.must<Log>('GET', `/api/logs/${log.id}`)).status === 'ready')

function eastwards(point: { latitudeDeg: number, longitudeDeg: number }, by: number) {
  return { ...point, longitudeDeg: point.longitudeDeg + by }
}

/** Moves the start/finish line along the straight: another set of laps of the same log. */
function moved(by: number) {
  return lines.map(line => line.kind === 'start_finish'
    ? { ...line, a: eastwards(line.a, by), b: eastwards(line.b, by) }
    : line)
}

describe('lines', () => {
  it('can be tried on a log without storing anything', async () => {
    const trial = await own.client.must<LineTrial>('POST', `/api/layouts/${own.layoutId}/line-trials`, { logId: log.id, lines })
    expect(trial.timedLaps).toBeGreaterThanOrEqual(6)
    expect(trial.lines.map(line => line.ordinal)).toEqual([0, 1, 2])
    expect(trial.lines[0]!.crossed).toBe(trial.timedLaps + 1)
    expect(await lapsOf(own, own.outingId)).toEqual([])
  })

  it('warn when they are never crossed', async () => {
    const nowhere = { kind: 'start_finish', ordinal: 0, a: { latitudeDeg: 54.5, longitudeDeg: -2.9 }, b: { latitudeDeg: 54.5, longitudeDeg: -2.8999 } }
    const trial = await own.client.must<LineTrial>('POST', `/api/layouts/${own.layoutId}/line-trials`, { logId: log.id, lines: [nowhere] })
    expect(trial.timedLaps).toBe(0)
    expect(trial.warnings.map(warning => warning.message).join(' ')).toMatch(/never/)
  })

  it('must be numbered without a gap, have two ends and not be endless', async () => {
    const [start, first] = lines as [typeof lines[0], typeof lines[0]]
    const point = { ...start, b: start.a }
    const twoKilometres = { ...start, b: eastwards(start.a, 0.03) }
    for (const wrong of [[first], [start, { ...first, ordinal: 2 }], [point], [twoKilometres]]) {
      const { status } = await own.client.send<Problem>('PUT', `/api/layouts/${own.layoutId}/lines`, { basedOnVersion: 0, lines: wrong })
      expect(status).toBe(400)
    }
  })
})

describe('laps', () => {
  it('come when lines are drawn, consecutive and whole', async () => {
    expect((await saveLines(own, lines)).recutting).toBe(1)
    await ready()
    const laps = await lapsOf(own, own.outingId)
    expect(laps[0]).toMatchObject({ number: 0, kind: 'out' })
    expect(laps.at(-1)).toMatchObject({ kind: 'in' })
    const timed = laps.filter(lap => lap.kind === 'timed')
    expect(timed.length).toBeGreaterThanOrEqual(6)
    for (const lap of timed) {
      expect(lap.sectorsS).toHaveLength(3)
      // Sectors are differences of the same three instants, so they add up but for rounding in the last bits.
      expect(lap.sectorsS.reduce((sum, sector) => sum! + sector!, 0)).toBeCloseTo(lap.timeS, 9)
    }
  })

  it('are the same bit for bit, with the same identifiers, when they are cut again from the stored channels', async () => {
    const fromFile = await garage()
    await saveLines(fromFile, lines)
    const direct = await uploadAndRead(fromFile, fromFile.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
    expect(direct.status).toBe('ready')
    const before = await lapsOf(fromFile, fromFile.outingId)
    await saveLines(fromFile, moved(0.0002))
    await waitFor('other laps', async () => (await lapsOf(fromFile, fromFile.outingId))[1]!.startS !== before[1]!.startS)
    await saveLines(fromFile, lines)
    const again = await waitFor('the first laps again', async () => {
      const laps = await lapsOf(fromFile, fromFile.outingId)
      return laps[1]!.startS === before[1]!.startS ? laps : null
    })
    expect(again).toEqual(before)
  })

  it('keep an exclusion and its reason when the line moves', async () => {
    await ready()
    const [, second] = (await lapsOf(own, own.outingId)).filter(lap => lap.kind === 'timed')
    const excluded = await own.client.must('PATCH', `/api/laps/${second!.id}`, { excluded: true, reason: 'traffic in corner 8' })
    expect(excluded).toMatchObject({ id: second!.id, excluded: true, excludedReason: 'traffic in corner 8' })
    await saveLines(own, moved(0.0003))
    const kept = await waitFor('the moved cut', async () => {
      const lap = (await lapsOf(own, own.outingId)).find(item => item.id === second!.id)
      return lap && lap.startS !== second!.startS ? lap : null
    })
    expect(kept).toMatchObject({ excluded: true, excludedReason: 'traffic in corner 8', number: 2 })
    expect(await own.client.must('PATCH', `/api/laps/${second!.id}`, { excluded: false })).toMatchObject({ excluded: false, excludedReason: '' })
  })

  it('are left out with a reason only', async () => {
    const [lap] = await lapsOf(own, own.outingId)
    const { status, body } = await own.client.send<Problem>('PATCH', `/api/laps/${lap!.id}`, { excluded: true, reason: ' ' })
    expect(status).toBe(400)
    expect(body.errors).toMatchObject([{ path: 'reason' }])
  })

  it('go when the lines go', async () => {
    const other = await garage()
    await saveLines(other, lines)
    const read = await uploadAndRead(other, other.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
    await saveLines(other, [])
    await waitFor('the laps to go', async () => (await lapsOf(other, other.outingId)).length === 0)
    expect(await other.client.must<Log>('GET', `/api/logs/${read.id}`)).toMatchObject({ status: 'no_lines' })
  })
})

describe('lines changed by two people', () => {
  it('are told to the second, and nothing is overwritten', async () => {
    const other = await garage()
    const first = await other.client.send('PUT', `/api/layouts/${other.layoutId}/lines`, { basedOnVersion: 0, lines })
    const second = await other.client.send<Problem>('PUT', `/api/layouts/${other.layoutId}/lines`, { basedOnVersion: 0, lines: [] })
    expect([first.status, second.status]).toEqual([200, 409])
    expect((await other.client.must<{ lines: unknown[] }>('GET', `/api/layouts/${other.layoutId}`)).lines).toHaveLength(3)
  })
})

describe('a comparison', () => {
  it('holds two laps of different days and setups against each other, and ends at their difference', async () => {
    const other = await garage()
    await saveLines(other, lines)
    const [first, last] = [demoLogs()[0]!, demoLogs()[5]!]
    await uploadAndRead(other, other.outingId, first.fileName, first.csv)
    const { sheet } = await other.client.must<Setup>('GET', `/api/setups/${other.setupId}`)
    const { rl, rr } = sheet.corners
    const corners = { ...sheet.corners, rl: { ...rl, springNpmm: 32 }, rr: { ...rr, springNpmm: 32 } }
    const setup = await other.client.must<{ id: string, number: number }>('POST', `/api/cars/${other.carId}/setups`, {
      name: 'Stiffer', basedOnId: other.setupId, sheet: { ...sheet, corners },
    })
    expect(setup.number).toBe(2)
    const outing = await other.client.must<{ id: string, number: number }>('POST', `/api/days/${other.dayId}/outings`, {
      layoutId: other.layoutId, carId: other.carId, setupId: setup.id, driverId: other.me.id,
    })
    expect(outing.number).toBe(2)
    await uploadAndRead(other, outing.id, last.fileName, last.csv)

    const { items } = await other.client.must<{ items: LapChoice[] }>('GET', `/api/laps?teamId=${other.teamId}&layoutId=${other.layoutId}`)
    expect(items.filter(lap => lap.isOutingBest)).toHaveLength(2)
    const lap = items.find(item => item.outing.number === 2)!
    const against = items.find(item => item.outing.number === 1)!
    const comparison = await other.client.must<Comparison>('GET', `/api/compare?lap=${lap.id}&against=${against.id}`)
    expect(comparison.differenceS[0]).toBe(0)
    // Shown to a tenth of a millisecond.
    expect(comparison.differenceS.at(-1)!).toBeCloseTo(lap.timeS - against.timeS, 4)
    expect(comparison.lap.speed).toHaveLength(comparison.stationM.length)
    // Harrow Fell is 3104 m along its centre line; the driven line is shorter on the inside of bends, by less than 2 %.
    expect(comparison.stationM.at(-1)!).toBeGreaterThan(3104 * 0.98)
    expect(comparison.stationM.at(-1)!).toBeLessThan(3104 * 1.01)
    expect(comparison.sectorLinesM).toHaveLength(2)
    expect(comparison.lap.brakings.length).toBeGreaterThanOrEqual(5)
    expect(comparison.setupDifferences).toEqual([{ label: 'Rear spring', unit: 'N/mm', against: null, lap: 32 }])

    const swapped = await other.client.must<Comparison>('GET', `/api/compare?lap=${against.id}&against=${lap.id}`)
    expect(swapped.differenceS.map(value => value && -value)).toEqual(comparison.differenceS)
  })

  it('needs two timed laps', async () => {
    const laps = (await own.client.must<Outing>('GET', `/api/outings/${own.outingId}`)).laps
    const { status, body } = await own.client.send<Problem>('GET', `/api/compare?lap=${laps[0]!.id}&against=${laps[1]!.id}`)
    expect(status).toBe(422)
    expect(body.detail).toMatch(/Lap 0/)
  })
})
