import { describe, expect, it } from 'vitest'
import { newOutingForm, outingFormSchema, outingFormToBody, outingToForm, type OutingForm } from '../../../shared/outing-form'
import { conditionsSchema, outingBody, type Day, type Outing } from '../../../shared/schemas/days'

const ID = (n: number) => `01890000-0000-7000-8000-00000000000${n}`

const FORM: OutingForm = {
  layoutId: ID(1), carId: ID(2), setupId: ID(3), driverId: ID(4), startedAt: '13:20', fuelStartL: 22, passenger: false,
  conditions: { ...conditionsSchema.parse({}), trackC: 34 },
  hotPressures: { fl: 210, fr: 212, rl: 205, rr: null },
  notes: 'Yellow flag at corner 8.',
}

const OUTING: Outing = {
  id: ID(5), teamId: ID(6), number: 3, startedAt: '2026-09-12T12:20:00.000Z',
  layout: { id: ID(1), name: 'Full', lineCount: 3 }, car: { id: ID(2), name: 'Hatchback' }, setup: { id: ID(3), number: 12, name: '' },
  driver: { id: ID(4), name: 'Nell Placeholder' }, fuelStartL: 22, passenger: true, conditions: FORM.conditions,
  hotPressures: { fl: 210, fr: 212, rl: 205, rr: null }, notes: 'Yellow flag at corner 8.', laps: [], logs: [], version: 1,
  changedAt: '2026-09-12T13:00:00.000Z',
  day: { id: ID(7), date: '2026-09-12', name: '', circuitId: ID(8), circuitName: 'Harrow Fell', timeZone: 'Europe/London' },
}

describe('the form of an outing', () => {
  it('becomes a body with an instant', () => {
    const body = outingFormToBody(outingFormSchema.parse(FORM), '2026-09-12', 'Europe/London')
    expect(outingBody.parse(body)).toEqual(body)
    expect(body.startedAt).toBe('2026-09-12T12:20:00.000Z')
    expect(body.hotPressures).toEqual({ fl: 210, fr: 212, rl: 205, rr: null })
  })

  it('comes back from an outing as it was typed', () => {
    const form = outingToForm(OUTING)
    expect(form).toMatchObject({ startedAt: '13:20', hotPressures: { fl: 210, fr: 212, rl: 205, rr: null }, passenger: true })
    expect(outingFormToBody(form, OUTING.day.date, OUTING.day.timeZone).startedAt).toBe(OUTING.startedAt)
  })

  it('may leave the start open, but takes no other nonsense', () => {
    expect(outingFormToBody({ ...FORM, startedAt: '' }, '2026-09-12', 'Europe/London').startedAt).toBeNull()
    expect(outingFormSchema.safeParse({ ...FORM, startedAt: '25:00' }).success).toBe(false)
    expect(outingFormSchema.safeParse({ ...FORM, startedAt: '9:30' }).success).toBe(false)
  })

  it('refuses a pressure that was typed in psi, in the unit of the box', () => {
    // 31 in a box that shows bar is stored as 3100 kPa.
    const judged = outingFormSchema.safeParse({ ...FORM, hotPressures: { ...FORM.hotPressures, fl: 3100 } })
    expect(judged.error?.issues).toMatchObject([{ path: ['hotPressures', 'fl'], message: 'between 0.5 and 5 bar' }])
  })
})

describe('a new outing', () => {
  const circuit: Day['circuit'] = { id: ID(8), name: 'Harrow Fell', timeZone: 'Europe/London', layouts: [{ id: ID(1), name: 'Full' }] }

  it('takes over what most likely has not changed, and leaves open what is measured anew', () => {
    const { day: _day, teamId: _team, ...summary } = OUTING
    const form = newOutingForm({ circuit, outings: [{ ...summary, setupChanges: [] }] }, ID(9), [{ id: ID(7) }])
    expect(form).toMatchObject({ layoutId: ID(1), carId: ID(2), setupId: ID(3), driverId: ID(4) })
    expect(form).toMatchObject({ passenger: true, conditions: { trackC: 34 } })
    expect(form).toMatchObject({ startedAt: '', fuelStartL: null, notes: '', hotPressures: { fl: null, fr: null, rl: null, rr: null } })
  })

  it('begins a day with the only layout there is and the person who asks', () => {
    const first = newOutingForm({ circuit, outings: [] }, ID(9), [{ id: ID(7) }])
    expect(first).toMatchObject({ layoutId: ID(1), carId: ID(7), driverId: ID(9) })
    const bare = { circuit: { ...circuit, layouts: [] }, outings: [] }
    const open = newOutingForm(bare, ID(9), [{ id: ID(7) }, { id: ID(8) }])
    expect(open).toMatchObject({ layoutId: '', carId: '' })
  })
})
