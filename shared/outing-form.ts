import { z } from 'zod'
import { clockTime, localToInstant } from './local-time'
import { conditionsSchema, outingBody, type Day, type Outing, type OutingBody, type OutingSummary } from './schemas/days'
import type { Car } from './schemas/setups'

/** Pressures are shown in bar, so what is wrong with one is said in bar. */
const PRESSURE = 'between 0.5 and 5 bar'
const pressureSchema = z.number(PRESSURE).min(50, PRESSURE).max(500, PRESSURE).nullable()

/** What a person types for an outing: as the server takes it, but that the start is a time of day at the circuit. */
export const outingFormSchema = outingBody.extend({
  layoutId: z.uuid('please choose a layout'),
  carId: z.uuid('please choose a car'),
  setupId: z.uuid('please choose a setup'),
  driverId: z.uuid('please choose a driver'),
  startedAt: z.string().trim().regex(/^(?:(?:[01]\d|2[0-3]):[0-5]\d)?$/, 'a time such as 13:20'),
  /** kPa. */
  hotPressures: z.object({ fl: pressureSchema, fr: pressureSchema, rl: pressureSchema, rr: pressureSchema }),
})
export type OutingForm = z.infer<typeof outingFormSchema>

/**
 * The body for the server, with an instant.
 * @param known the start as it is stored: kept when the form still shows it, since a time that comes twice in the night
 *   of the change from summer time may be its second passage
 */
export function outingFormToBody(
  form: OutingForm, date: string, timeZone: string, known: string | null = null,
): OutingBody {
  return { ...form, startedAt: form.startedAt ? localToInstant(date, form.startedAt, timeZone, known) : null }
}

/** The form of an outing that exists. */
export function outingToForm(outing: Outing): OutingForm {
  return {
    layoutId: outing.layout.id,
    carId: outing.car.id,
    setupId: outing.setup.id,
    driverId: outing.driver.id,
    startedAt: clockTime(outing.startedAt, outing.day.timeZone) ?? '',
    fuelStartL: outing.fuelStartL,
    passenger: outing.passenger,
    conditions: { ...outing.conditions },
    hotPressures: { ...outing.hotPressures },
    notes: outing.notes,
  }
}

/**
 * The form of a new outing, filled with what most likely has not changed since the day's last one, and with what there
 * is only one of. What is measured anew each time (start, fuel, hot pressures) and notes are left open.
 */
export function newOutingForm(
  day: Pick<Day, 'circuit' | 'outings'>,
  driverId: string,
  cars: readonly Pick<Car, 'id'>[],
): OutingForm {
  const last: OutingSummary | undefined = day.outings.at(-1)
  const layouts = day.circuit.layouts
  return {
    layoutId: last?.layout.id ?? (layouts.length === 1 ? layouts[0]!.id : ''),
    carId: last?.car.id ?? (cars.length === 1 ? cars[0]!.id : ''),
    setupId: last?.setup.id ?? '',
    driverId: last?.driver.id ?? driverId,
    startedAt: '',
    fuelStartL: null,
    passenger: last?.passenger ?? false,
    conditions: last ? { ...last.conditions } : conditionsSchema.parse({}),
    hotPressures: { fl: null, fr: null, rl: null, rr: null },
    notes: '',
  }
}
