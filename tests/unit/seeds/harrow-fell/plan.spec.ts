import { describe, expect, it } from 'vitest'
import { PLAN } from '../../../../seeds/harrow-fell/plan'
import { circuitBody, layoutBody, linesBody } from '../../../../shared/schemas/circuits'
import { conditionsSchema, hotPressuresSchema } from '../../../../shared/schemas/days'
import { instantSchema } from '../../../../shared/schemas/common'
import { carBody, sheetSchema } from '../../../../shared/schemas/setups'
import { makeTrack } from '../../../../seeds/harrow-fell/track'

const outings = PLAN.days.flatMap(day => day.outings)

describe('PLAN', () => {
  it('holds two days of three outings, six to ten laps each, with the setups mirrored', () => {
    expect(PLAN.days.map(day => day.outings.map(outing => outing.setup))).toEqual([[1, 2, 3], [3, 2, 1]])
    expect(outings.every(outing => outing.timedLaps >= 6 && outing.timedLaps <= 10)).toBe(true)
    expect(new Set(outings.map(outing => outing.fileName)).size).toBe(6)
    expect(new Set(outings.map(outing => outing.seed)).size).toBe(6)
  })

  it('is accepted by the schemas of the application as it stands', () => {
    const same = (schema: { parse: (value: unknown) => unknown }, value: unknown) => {
      expect(schema.parse(value)).toEqual(value)
    }
    PLAN.setups.forEach(setup => same(sheetSchema, setup.sheet))
    outings.forEach((outing) => {
      same(conditionsSchema, outing.conditions)
      same(hotPressuresSchema, outing.hotPressures)
      same(instantSchema, outing.startedAt)
    })
    same(carBody, PLAN.car)
    same(layoutBody, PLAN.circuit.layout)
    const { name, timeZone, notes } = PLAN.circuit
    same(circuitBody, { name, timeZone, notes })
    const { lines } = makeTrack()
    same(linesBody, { basedOnVersion: 0, lines: lines.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b })) })
  })

  it('starts outings in order on their own day, in the offset of the circuit\'s time zone', () => {
    for (const day of PLAN.days) {
      const starts = day.outings.map(outing => outing.startedAt)
      expect([...starts].sort()).toEqual(starts)
      for (const start of starts) {
        const local = new Intl.DateTimeFormat('sv-SE', { timeZone: PLAN.circuit.timeZone, dateStyle: 'short', timeStyle: 'medium' }).format(new Date(start))
        expect(local.replace(' ', 'T')).toBe(start.slice(0, 19))
        expect(start.slice(0, 10)).toBe(day.date)
      }
    }
  })

  it('names only people whose addresses can never exist (RFC 2606)', () => {
    expect(PLAN.people.map(person => person.role)).toEqual(['owner', 'coach', 'crew'])
    expect(PLAN.people.every(person => person.email.endsWith('.example'))).toBe(true)
    expect(outings.every(outing => PLAN.people.some(person => person.key === outing.driver))).toBe(true)
  })

  it('bases each revision on the one before', () => {
    expect(PLAN.setups.map(setup => [setup.number, setup.basedOn])).toEqual([[1, null], [2, 1], [3, 2]])
  })
})
