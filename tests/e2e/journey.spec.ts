import { randomUUID } from 'node:crypto'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Browser, Page } from 'playwright-core'
import { axe, launch, layoutFaults, openWindow } from '../support/browser'
import { PASSWORD } from '../support/team'

const LOG = fileURLToPath(new URL('../../fixtures/harrow-fell.csv', import.meta.url))

let browser: Browser

beforeAll(async () => {
  browser = await launch()
})

afterAll(() => browser.close())

const press = (page: Page, name: string | RegExp) => page.getByRole('button', { name }).click()
const follow = (page: Page, name: string | RegExp) => page.getByRole('link', { name }).first().click()
/** The address is there before the page is: what follows must wait for the page. */
const heading = (page: Page, text: string | RegExp) => page.getByRole('heading', { level: 1, name: text }).waitFor()

async function register(page: Page): Promise<void> {
  await page.goto('/register', { waitUntil: 'networkidle' })
  await page.getByLabel('Your name').fill('Nell Placeholder')
  await page.getByLabel('Name of the team').fill('Fell Road Garage')
  await page.getByLabel('E-mail address').fill(`${randomUUID()}@lapwright.example`)
  await page.getByLabel('Password').fill(PASSWORD)
  await page.getByLabel('Password').press('Enter')
  await page.waitForURL('**/days')
}

async function addCircuit(page: Page): Promise<void> {
  await follow(page, 'Circuits')
  await follow(page, 'Add a circuit')
  await heading(page, /new circuit/)
  await page.getByLabel('Name', { exact: true }).fill('Harrow Fell')
  await page.getByLabel('Time zone').fill('Europe/London')
  await press(page, 'Add the circuit')
  await heading(page, /no layout yet/)
  await page.getByLabel('Name of the layout').fill('Full circuit')
  await press(page, 'Add the layout')
  await page.getByRole('link', { name: /Full circuit/ }).first().waitFor()
}

async function addCar(page: Page): Promise<void> {
  await follow(page, 'Cars')
  await follow(page, 'Add a car')
  await heading(page, /new car/)
  await page.getByLabel('Name', { exact: true }).fill('No. 47')
  await press(page, 'Add the car')
  await page.getByLabel('What this revision is').fill('Baseline')
  await page.getByLabel('Spring, rear left').fill('28')
  await page.getByRole('button', { name: /same as left/ }).last().click()
  await press(page, 'Sign the sheet')
  // The sheet that is being written says the same: only its address tells that it was signed.
  await page.waitForURL(/\/setups\/[0-9a-f-]{36}$/)
  // The left was typed, the right taken over with one touch.
  await heading(page, /fresh sheet, with 2 settings/)
}

async function addOuting(page: Page): Promise<void> {
  await follow(page, 'Days')
  await follow(page, 'Add a track day')
  await page.getByLabel('Date').fill('2026-09-12')
  await press(page, 'Add the day')
  await heading(page, /No outing/)
  await follow(page, 'Add an outing')
  await heading(page, /Outing 1/)
  // Layout, car, setup and driver are chosen, since there is one of each.
  await press(page, 'Add the outing')
  await page.waitForURL(/\/outings\/[0-9a-f-]{36}$/)
}

async function uploadLog(page: Page): Promise<void> {
  await page.locator('input[type=file]').setInputFiles(LOG)
  await page.waitForURL(/\/logs\/[0-9a-f-]{36}$/)
  await heading(page, /columns are matched/)
  await press(page, 'Use these columns')
  await page.getByRole('link', { name: 'Draw the timing lines' }).click({ timeout: 60_000 })
}

/** Draws a line on the map with two clicks across the trace. */
async function draw(page: Page, x: number, y: number, half: { x: number, y: number }): Promise<void> {
  await press(page, /^Draw /)
  await page.mouse.move(x - half.x, y - half.y, { steps: 3 })
  await page.mouse.click(x - half.x, y - half.y)
  await page.mouse.move(x + half.x, y + half.y, { steps: 6 })
  await page.mouse.click(x + half.x, y + half.y)
}

async function drawLines(page: Page): Promise<void> {
  await heading(page, /No lines yet/)
  const trace = await page.locator('.leaflet-overlay-pane path').first().boundingBox()
  if (!trace) throw new Error('no trace on the map')
  // The lower straight lies along the bottom of the drawing; here there is no pit lane beside it.
  await draw(page, trace.x + trace.width * 0.76, trace.y + trace.height - 8, { x: 0, y: 12 })
  await heading(page, /One line would cut (eight|nine) timed laps/)
  // A sector line by keyboard: laid across the trace, then put where it is wanted.
  for (const station of ['1000', '2000']) {
    await press(page, 'Lay one across the trace')
    await page.getByLabel('at, m').last().fill(station)
    await page.getByLabel('at, m').last().press('Enter')
  }
  await press(page, 'Save the lines')
  await page.getByRole('status').filter({ hasText: 'Saved.' }).waitFor()
}

/** The walk-through of README.md, from registration to comparison, in one browser. */
it('carries a stranger from registration to a comparison', async () => {
  const { page, complaints } = await openWindow(browser, 'desk')
  page.setDefaultTimeout(30_000)
  await register(page)
  await addCircuit(page)
  await addCar(page)
  await addOuting(page)
  const outing = page.url()
  await uploadLog(page)
  await drawLines(page)

  await follow(page, 'See the laps of outing 1')
  await page.waitForURL(outing)
  // The log may still be being cut: its laps come by themselves.
  await heading(page, /Outing 1 did 1:\d\d/)
  const rows = page.locator('table.laps tbody tr')
  expect(await rows.count()).toBeGreaterThanOrEqual(10)
  expect(await page.getByText('sum of best sectors').count()).toBe(1)
  await page.getByRole('checkbox').nth(1).check()
  await page.getByRole('checkbox').nth(4).check()
  await follow(page, /^Compare lap/)
  await heading(page, /^Lap .* (slower|faster) than lap/)
  expect(new URL(page.url()).searchParams.get('lap')).toMatch(/^[0-9a-f-]{36}$/)
  await press(page, 'Unfold longitudinal and lateral g')
  await page.getByText('most apart at').first().waitFor()

  const address = page.url()
  await page.goto('about:blank')
  await page.goto(address, { waitUntil: 'networkidle' })
  await heading(page, /^Lap .* (slower|faster) than lap/)
  expect(await layoutFaults(page)).toEqual([])
  expect(await axe(page)).toEqual([])
  expect(complaints).toEqual([])
})
