import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Browser, Page } from 'playwright-core'
import type { Car, Setup } from '../../shared/schemas/setups'
import type { Circuit } from '../../shared/schemas/circuits'
import type { Day, Outing } from '../../shared/schemas/days'
import { axe, launch, layoutFaults, openWindow, type Watched } from '../support/browser'
import { garage, type Garage } from '../support/team'

let browser: Browser
let own: Garage

beforeAll(async () => {
  browser = await launch()
  own = await garage()
})

afterAll(() => browser.close())

const press = (page: Page, name: string | RegExp) => page.getByRole('button', { name }).click()
const outing = () => own.client.must<Outing>('GET', `/api/outings/${own.outingId}`)
const told = (page: Page) => page.getByRole('alert').filter({ hasText: /Somebody else changed this sheet at \d\d:\d\d\./ })

describe('two tabs on the form of one outing', () => {
  let first: Watched
  let second: Page
  let theirs = ''
  let turn = 0

  beforeEach(async () => {
    first = await openWindow(browser, 'desk', own.client.cookie())
    second = await first.context.newPage()
    for (const page of [first.page, second]) await page.goto(`/outings/${own.outingId}/edit`, { waitUntil: 'networkidle' })
    // Other words each time: saving what the sheet says already changes nothing.
    theirs = `Yellow flag at corner ${++turn}.`
    await first.page.getByLabel('Notes').fill(theirs)
    await first.page.getByLabel('With a passenger').check()
    await press(first.page, 'Keep it')
    await first.page.waitForURL(`**/outings/${own.outingId}`)
    await second.getByLabel('Notes').fill('Brake pedal long after lap 5.')
    await second.getByLabel('Fuel at the start').fill('22')
    await press(second, 'Keep it')
    await told(second).waitFor()
    return () => first.context.close()
  })

  it('tells the second one, who keeps what was typed and can save it over theirs', async () => {
    expect(await second.getByLabel('Notes').inputValue()).toBe('Brake pedal long after lap 5.')
    expect((await outing()).notes).toBe(theirs)
    // The words stand far above the button that was pressed: they are brought into view.
    await expect.poll(() => second.evaluate(() => document.activeElement?.getAttribute('role'))).toBe('alert')
    await expect.poll(async () => (await told(second).boundingBox())!.y).toBeGreaterThanOrEqual(0)
    expect(await axe(second)).toEqual([])
    await press(second, 'Save mine over it')
    await second.waitForURL(`**/outings/${own.outingId}`)
    expect(await outing()).toMatchObject({ notes: 'Brake pedal long after lap 5.', fuelStartL: 22, passenger: false })
    // The refused request is in the browser's own log, and nothing else.
    expect(first.complaints).toEqual([])
  })

  it('lets the second one see theirs, come back to what was typed, and take theirs', async () => {
    await press(second, 'See theirs')
    expect(await second.getByLabel('Notes').inputValue()).toBe(theirs)
    expect(await second.getByLabel('With a passenger').isChecked()).toBe(true)
    expect(await axe(second)).toEqual([])
    await press(second, 'Back to mine')
    expect(await second.getByLabel('Notes').inputValue()).toBe('Brake pedal long after lap 5.')
    expect(await second.getByLabel('Fuel at the start').inputValue()).toBe('22')
    await press(second, 'See theirs')
    await press(second, 'Take theirs')
    expect(await told(second).count()).toBe(0)
    // Saved from here on it is based on theirs.
    await second.getByLabel('Fuel at the start').fill('30')
    await press(second, 'Keep it')
    await second.waitForURL(`**/outings/${own.outingId}`)
    expect(await outing()).toMatchObject({ notes: theirs, fuelStartL: 30, passenger: true })
  })

  it('tells it again after a reload, since the draft is as old as it was', async () => {
    await second.reload({ waitUntil: 'networkidle' })
    expect(await second.getByLabel('Notes').inputValue()).toBe('Brake pedal long after lap 5.')
    await press(second, 'Keep it')
    await told(second).waitFor()
    expect((await outing()).notes).toBe(theirs)
  })

  it('fits on a phone', async () => {
    await second.setViewportSize({ width: 390, height: 844 })
    expect(await layoutFaults(second)).toEqual([])
  })
})

interface Corrected { page: () => string, field: string, open: string, url: () => string, body: (now: never) => object, key: 'notes' | 'name' }

/** The other forms that replace a sheet. */
const FORMS: Record<string, Corrected> = {
  car: { page: () => `/cars/${own.carId}`, field: 'Notes', open: 'Correct this sheet', url: () => `/api/cars/${own.carId}`, body: (now: Car) => ({ name: now.name, notes: 'theirs' }), key: 'notes' },
  circuit: { page: () => `/circuits/${own.circuitId}`, field: 'Notes', open: 'Correct this sheet', url: () => `/api/circuits/${own.circuitId}`, body: (now: Circuit) => ({ name: now.name, timeZone: now.timeZone, notes: 'theirs' }), key: 'notes' },
  layout: { page: () => `/circuits/${own.circuitId}`, field: 'Name of the layout', open: 'Correct Full circuit', url: () => `/api/layouts/${own.layoutId}`, body: () => ({ name: 'Theirs' }), key: 'name' },
  day: { page: () => `/days/${own.dayId}`, field: 'Notes', open: 'Correct this sheet', url: () => `/api/days/${own.dayId}`, body: (now: Day) => ({ circuitId: now.circuit.id, date: now.date, notes: 'theirs' }), key: 'notes' },
}

it.each(Object.entries(FORMS))('the form of a %s tells the second one too, and both ways work', async (_name, { page: path, field, open, url, body, key }) => {
  const { page, context } = await openWindow(browser, 'desk', own.client.cookie())
  const now = () => own.client.must<Setup & { version: number, notes: string }>('GET', url())
  await page.goto(path(), { waitUntil: 'networkidle' })
  await press(page, open)
  const before = await now()
  await own.client.must('PUT', url(), { ...body(before as never), basedOnVersion: before.version })
  await page.getByLabel(field, { exact: true }).fill('Mine')
  await press(page, 'Save')
  await told(page).waitFor()
  expect(await page.getByLabel(field, { exact: true }).inputValue()).toBe('Mine')
  await press(page, 'See theirs')
  expect((await page.getByLabel(field, { exact: true }).inputValue()).toLowerCase()).toBe('theirs')
  await press(page, 'Back to mine')
  await press(page, 'Save mine over it')
  await page.getByLabel(field, { exact: true }).waitFor({ state: key === 'name' ? 'visible' : 'detached' })
  await expect.poll(async () => (await now())[key]).toBe('Mine')
  await context.close()
})
