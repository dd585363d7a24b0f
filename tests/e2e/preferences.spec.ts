import process from 'node:process'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Browser, Page } from 'playwright-core'
import { axe, launch, layoutFaults, openWindow, SIZES } from '../support/browser'
import { fixture, fixtureLines, garage, lapsOf, saveLines, uploadAndRead, type Garage } from '../support/team'

let browser: Browser
let made: Garage
let lapIds: string[]

beforeAll(async () => {
  browser = await launch()
  made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  await uploadAndRead(made, made.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  lapIds = (await lapsOf(made, made.outingId)).filter(lap => lap.kind === 'timed').map(lap => lap.id)
})

afterAll(() => browser.close())

const paper = (page: Page) => page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor)
const PAPER = 'rgb(251, 248, 240)'
const DARK = 'rgb(22, 20, 15)'

async function open(page: Page, path: string) {
  const response = await page.goto(path, { waitUntil: 'networkidle' })
  expect(response?.status(), path).toBe(200)
  await page.evaluate(() => document.fonts.ready)
}

describe('a person chooses imperial units, German figures and the dark sheet', () => {
  it('and every sheet follows, from the first byte and without a fault', async () => {
    const { context, page, complaints } = await openWindow(browser, 'desk', made.client.cookie())
    await open(page, '/account')
    expect(await paper(page)).toBe(PAPER)
    await page.getByLabel('Units').selectOption('imperial')
    await page.getByLabel('Figures and dates').selectOption('de-DE')
    await page.getByLabel('Sheet', { exact: true }).selectOption('dark')
    expect(await page.locator('.example').innerText()).toContain('89 mph')
    await page.getByRole('button', { name: 'Keep these choices' }).click()
    await page.getByText('Kept. Every sheet').waitFor()
    // Without a reload.
    expect(await paper(page)).toBe(DARK)
    expect(await axe(page)).toEqual([])

    await open(page, `/outings/${made.outingId}`)
    expect(await page.locator('.laps tbody .time').first().innerText()).toMatch(/\d:\d\d,\d{3}/)
    expect(await page.locator('main').innerText()).not.toMatch(/\d:\d\d\.\d{3}/)
    expect([await paper(page), await axe(page)]).toEqual([DARK, []])

    await open(page, `/compare?lap=${lapIds[1]}&against=${lapIds[3]}`)
    await page.locator('.trace-chart svg text', { hasText: 'ft' }).first().waitFor()
    const compare = await page.locator('main').innerText()
    expect(compare).toMatch(/\d mph/)
    expect(compare).toMatch(/\d ft/)
    expect(compare).not.toMatch(/km\/h|\d m\b/)
    expect(await page.locator('h1').innerText()).toMatch(/\d:\d\d,\d{3}.*\d,\d{3} s/s)
    expect([await paper(page), await axe(page)]).toEqual([DARK, []])

    await open(page, `/cars/${made.carId}/setups/new`)
    await page.locator('[name="sheet.corners.fl.springNpmm"]').fill('160.5')
    await page.locator('[name="sheet.corners.fl.coldKpa"]').fill('2')
    await page.locator('[name=name]').fill('Typed by the pound')
    await page.getByRole('button', { name: 'Sign the sheet' }).click()
    // The plausible range is told in the reader's unit.
    await page.getByText('between 7,3 and 72,5 psi').first().waitFor()
    await page.locator('[name="sheet.corners.fl.coldKpa"]').fill('26,5')
    await page.getByRole('button', { name: 'Sign the sheet' }).click()
    await page.waitForURL(/\/setups\/[0-9a-f-]{36}$/)
    await page.locator('.carsheet .value').first().waitFor()
    const sheet = await page.locator('.carsheet').innerText()
    expect(sheet).toMatch(/160,5\s*lbf\/in/)
    expect(sheet).toMatch(/26,5\s*psi/)
    expect([await paper(page), await axe(page)]).toEqual([DARK, []])
    expect(complaints).toEqual([])
    await context.close()
  })

  it('and the server draws it so, before any script has run', async () => {
    const html = await (await fetch(new URL(`/outings/${made.outingId}`, process.env.LAPWRIGHT_TEST_URL), { headers: { cookie: made.client.cookie() } })).text()
    expect(html).toMatch(/<html[^>]*data-sheet="dark"/)
    expect(html).toMatch(/<meta[^>]*name="color-scheme"[^>]*content="dark"/)
    expect(html.replace(/<script[\s\S]*?<\/script>/g, '')).toMatch(/\d:\d\d,\d{3}/)
  })

  it('and still prints on paper', async () => {
    const { context, page } = await openWindow(browser, 'desk', made.client.cookie())
    await open(page, `/outings/${made.outingId}`)
    await page.emulateMedia({ media: 'print', colorScheme: 'dark' })
    expect(await paper(page)).toBe('rgb(255, 255, 255)')
    expect(await page.evaluate(() => getComputedStyle(document.querySelector('h1')!).color)).toBe('rgb(0, 0, 0)')
    await context.close()
  })

  it.each(Object.keys(SIZES) as (keyof typeof SIZES)[])('and no page of a %s is too wide or hard to read for it', async (size) => {
    const { context, page, complaints } = await openWindow(browser, size, made.client.cookie())
    for (const path of ['/days', `/days/${made.dayId}`, `/outings/${made.outingId}/edit`, `/layouts/${made.layoutId}`, `/compare?lap=${lapIds[1]}&against=${lapIds[3]}`, `/cars/${made.carId}`, `/cars/${made.carId}/setups/new`, `/circuits/${made.circuitId}`, '/account']) {
      await open(page, path)
      expect(await layoutFaults(page), path).toEqual([])
      expect(await axe(page), path).toEqual([])
    }
    expect(complaints).toEqual([])
    await context.close()
  })
})

describe('a stranger', () => {
  it('reads the sheet as the device has it, in metric units', async () => {
    const { context, page, complaints } = await openWindow(browser, 'desk')
    for (const [colorScheme, colour] of [['light', PAPER], ['dark', DARK]] as const) {
      await page.emulateMedia({ colorScheme })
      await open(page, '/')
      expect(await paper(page)).toBe(colour)
      expect(await page.locator('main').innerText()).toContain('km/h')
      expect(await axe(page)).toEqual([])
    }
    expect(complaints).toEqual([])
    await context.close()
  })
})
