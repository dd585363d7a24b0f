import { randomUUID } from 'node:crypto'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Browser, Page } from 'playwright-core'
import { makeClient } from '../../seeds/client'
import { axe, launch, layoutFaults, openWindow, type Watched } from '../support/browser'
import { baseUrl, fixtureLines, PASSWORD } from '../support/team'

const LOG = fileURLToPath(new URL('../../fixtures/harrow-fell.csv', import.meta.url))

let browser: Browser

beforeAll(async () => {
  browser = await launch()
})

afterAll(() => browser.close())

const press = (page: Page, name: string | RegExp) => page.getByRole('button', { name }).click()
const heading = (page: Page, text: string | RegExp) => page.getByRole('heading', { level: 1, name: text }).waitFor()
const strip = (page: Page) => page.getByRole('navigation', { name: 'First steps' })
/** Waits until the line at the head of the sheet names a step. */
const step = (page: Page, text: RegExp) => strip(page).getByText(text).waitFor()

/** A stranger who has just registered, on the page that this leads to. */
async function newcomer(size: 'desk' | 'phone'): Promise<Watched> {
  const opened = await openWindow(browser, size)
  const { page } = opened
  page.setDefaultTimeout(30_000)
  await page.goto('/register', { waitUntil: 'networkidle' })
  await page.getByLabel('Your name').fill('Nell Placeholder')
  await page.getByLabel('Name of the team').fill('Fell Road Garage')
  await page.getByLabel('E-mail address').fill(`${randomUUID()}@lapwright.example`)
  await page.getByLabel('Password').fill(PASSWORD)
  await press(page, 'Register')
  await heading(page, /takes five steps/)
  return opened
}

async function sound({ page, complaints }: Watched): Promise<void> {
  expect(await layoutFaults(page)).toEqual([])
  expect(await axe(page)).toEqual([])
  expect(complaints).toEqual([])
}

describe.each(['desk', 'phone'] as const)('a newcomer at the size of a %s', (size) => {
  it('comes from registration to laps and a comparison with one touch', async () => {
    const opened = await newcomer(size)
    const { page, context } = opened
    expect(await page.locator('ol.steps li').count()).toBe(5)
    await sound(opened)

    await press(page, 'Look around with the demonstration log')
    await page.waitForURL(/\/start\?day=/)
    await page.getByRole('heading', { name: /15 timed laps/ }).waitFor({ timeout: 60_000 })
    await sound(opened)
    const ways = page.url()

    await page.getByRole('link', { name: 'See the laps' }).click()
    await heading(page, /Two outings, 15 laps count/)
    await page.goto(ways, { waitUntil: 'networkidle' })
    await page.getByRole('link', { name: 'Compare the two setups' }).click()
    await heading(page, /^Lap .* (slower|faster) than lap/)
    // What differed on the car stands beside it: the two laps were driven on two revisions.
    await page.getByText('Rear spring', { exact: true }).waitFor()
    await sound(opened)

    // Asked for again, it is led to and not made twice.
    await page.goto('/start', { waitUntil: 'networkidle' })
    await press(page, 'Look around with the demonstration log')
    await page.waitForURL(ways)
    await page.goto('/days', { waitUntil: 'networkidle' })
    expect(await page.locator('table.listed tbody tr').count()).toBe(1)
    await context.close()
  })
})

describe('the way to a log of one’s own', () => {
  it('is a list that knows what is done, and leads on from every sheet', async () => {
    const opened = await newcomer('desk')
    const { page, context } = opened
    await press(page, 'Begin with a log of my own')
    await heading(page, /new circuit/)
    await step(page, /Step 1 of 5/)
    await page.getByLabel('Name', { exact: true }).fill('Harrow Fell')
    await page.getByLabel('Time zone').fill('Europe/London')
    await press(page, 'Add the circuit')
    await heading(page, /no layout yet/)
    // A circuit alone is half a step.
    await step(page, /Step 1 of 5/)
    await page.getByLabel('Name of the layout').fill('Full circuit')
    await press(page, 'Add the layout')
    await step(page, /Step 2 of 5/)

    await strip(page).getByRole('link', { name: 'Add a car' }).click()
    await page.getByLabel('Name', { exact: true }).fill('No. 47')
    await press(page, 'Add the car')
    await page.getByLabel('What this revision is').fill('Baseline')
    await press(page, 'Sign the sheet')
    await step(page, /Step 3 of 5/)

    // Leaving and coming back loses nothing: the list says what there is.
    await page.goto('/days', { waitUntil: 'networkidle' })
    await heading(page, /Two of five steps are done/)
    await page.getByText('Harrow Fell, Full circuit').waitFor()
    expect(await page.locator('ol.steps [aria-current=step]').innerText()).toMatch(/A track day and an outing/)
    await sound(opened)

    await page.locator('ol.steps').getByRole('link', { name: 'Add a track day' }).click()
    await page.getByLabel('Date').fill('2026-09-12')
    await press(page, 'Add the day')
    await strip(page).getByRole('link', { name: 'Add an outing' }).click()
    await heading(page, /Outing 1/)
    await press(page, 'Add the outing')
    await step(page, /Step 4 of 5/)

    await page.locator('input[type=file]').setInputFiles(LOG)
    await heading(page, /columns are matched/)
    await step(page, /Step 4 of 5/)
    await press(page, 'Use these columns')
    await step(page, /Step 5 of 5/)
    await strip(page).getByRole('link', { name: 'Draw the timing lines' }).click({ timeout: 60_000 })
    await page.waitForURL(/\/layouts\//)

    const layoutId = new URL(page.url()).pathname.split('/').at(-1)!
    const [session] = await context.cookies()
    const cookie = (await context.cookies()).find(each => each.name === 'lapwright') ?? session!
    const client = makeClient(baseUrl(), `${cookie.name}=${cookie.value}`)
    await client.must('PUT', `/api/layouts/${layoutId}/lines`, { basedOnVersion: 0, lines: fixtureLines('harrow-fell-lines.geojson') })
    await expect.poll(async () => {
      await page.goto('/start', { waitUntil: 'networkidle' })
      return page.locator('h1').innerText()
    }, { timeout: 60_000 }).toMatch(/All five steps are done/)
    await strip(page).getByText('the laps are there').waitFor()
    await strip(page).getByRole('button', { name: 'Close' }).click()
    await strip(page).waitFor({ state: 'detached' })
    await page.reload({ waitUntil: 'networkidle' })
    expect(await strip(page).count()).toBe(0)
    await sound(opened)
    await context.close()
  })
})
