import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Browser } from 'playwright-core'
import { axe, launch, layoutFaults, openWindow, SIZES, type Watched } from '../support/browser'
import { fixture, fixtureLines, garage, lapsOf, register, saveLines, uploadAndRead, type Garage } from '../support/team'

interface Filled extends Garage { logId: string, lapIds: string[] }

/** Every page, as a person of a team with one outing sees it. */
const PAGES: Record<string, (of: Filled) => string> = {
  'days': () => '/days',
  'the first steps': () => '/start',
  'a new day': () => '/days/new',
  'a day': of => `/days/${of.dayId}`,
  'a new outing': of => `/days/${of.dayId}/outings/new`,
  'an outing': of => `/outings/${of.outingId}`,
  'an outing, to be changed': of => `/outings/${of.outingId}/edit`,
  'a log': of => `/logs/${of.logId}`,
  'lines': of => `/layouts/${of.layoutId}`,
  'choosing laps': () => '/compare',
  'a comparison': of => `/compare?lap=${of.lapIds[1]}&against=${of.lapIds[3]}`,
  'cars': () => '/cars',
  'a new car': () => '/cars/new',
  'a car': of => `/cars/${of.carId}`,
  'a new setup sheet': of => `/cars/${of.carId}/setups/new`,
  'a setup sheet': of => `/setups/${of.setupId}`,
  'circuits': () => '/circuits',
  'a new circuit': () => '/circuits/new',
  'a circuit': of => `/circuits/${of.circuitId}`,
  'the account': () => '/account',
}

/** The same for a team in which nothing has been entered yet. */
const EMPTY = ['/days', '/start', '/compare', '/cars', '/circuits', '/days/new']
const STRANGER = ['/', '/sign-in', '/register']

let browser: Browser
let filled: Filled

beforeAll(async () => {
  browser = await launch()
  const made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  const log = await uploadAndRead(made, made.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  const laps = await lapsOf(made, made.outingId)
  filled = { ...made, logId: log.id, lapIds: laps.filter(lap => lap.kind === 'timed').map(lap => lap.id) }
})

afterAll(() => browser.close())

async function look({ page, complaints }: Watched, path: string): Promise<void> {
  complaints.length = 0
  const response = await page.goto(path, { waitUntil: 'networkidle' })
  expect(response?.status(), path).toBe(200)
  await page.evaluate(() => document.fonts.ready)
  expect(complaints, path).toEqual([])
  expect(await layoutFaults(page), path).toEqual([])
  expect(await axe(page), path).toEqual([])
}

describe.each(Object.keys(SIZES) as (keyof typeof SIZES)[])('at the size of a %s', (size) => {
  let signedIn: Watched
  let empty: Watched
  let stranger: Watched

  beforeAll(async () => {
    signedIn = await openWindow(browser, size, filled.client.cookie())
    empty = await openWindow(browser, size, (await register()).client.cookie())
    stranger = await openWindow(browser, size)
  })

  afterAll(async () => {
    for (const { context } of [signedIn, empty, stranger]) await context.close()
  })

  it.each(Object.entries(PAGES))('%s', (_name, path) => look(signedIn, path(filled)))
  it.each(EMPTY)('%s of a new team', path => look(empty, path))
  it.each(STRANGER)('%s of a stranger', path => look(stranger, path))

  it('a page that does not exist says so in the house’s voice', async () => {
    const response = await signedIn.page.goto('/nowhere/at-all', { waitUntil: 'networkidle' })
    expect(response?.status()).toBe(404)
    expect(await signedIn.page.locator('h1').innerText()).not.toBe('')
    expect(await axe(signedIn.page)).toEqual([])
  })

  it('a day of another team is not found, as if it did not exist', async () => {
    const response = await empty.page.goto(`/days/${filled.dayId}`, { waitUntil: 'networkidle' })
    expect(response?.status()).toBe(404)
  })

  it('a stranger is led to sign in, and back again', async () => {
    await stranger.page.goto('/cars', { waitUntil: 'networkidle' })
    expect(new URL(stranger.page.url()).pathname).toBe('/sign-in')
    expect(new URL(stranger.page.url()).searchParams.get('back')).toBe('/cars')
  })
})
