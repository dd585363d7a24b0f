import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Browser } from 'playwright-core'
import { launch, openWindow, type Watched } from '../support/browser'
import { fixture, fixtureLines, garage, lapsOf, saveLines, uploadAndRead } from '../support/team'

/** A4 less the margins of the style of print, px of CSS at 96 an inch. */
const PAPER_PX = Math.floor((210 - 2 * 14) / 25.4 * 96)

/** Sheets that are printed, with the pages each takes. */
const SHEETS = { day: 1, outing: 1, comparison: 2 } as const
type Sheet = keyof typeof SHEETS

let browser: Browser
let opened: Watched
const paths = {} as Record<Sheet, string>

beforeAll(async () => {
  browser = await launch()
  const made = await garage()
  await saveLines(made, fixtureLines('harrow-fell-lines.geojson'))
  await uploadAndRead(made, made.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  const [first, second] = (await lapsOf(made, made.outingId)).filter(lap => lap.kind === 'timed')
  Object.assign(paths, {
    day: `/days/${made.dayId}`,
    outing: `/outings/${made.outingId}`,
    comparison: `/compare?lap=${first!.id}&against=${second!.id}`,
  })
  opened = await openWindow(browser, 'desk', made.client.cookie())
})

afterAll(() => browser.close())

async function open(sheet: Sheet): Promise<void> {
  await opened.page.emulateMedia({ media: 'screen' })
  await opened.page.goto(paths[sheet], { waitUntil: 'networkidle' })
  await opened.page.evaluate(() => document.fonts.ready)
}

/** Pages of a PDF as Chromium writes it: each is an object of its own, none of them packed. */
function pageCount(pdf: Buffer): number {
  return pdf.toString('latin1').match(/\/Type\s*\/Page(?!s)/g)?.length ?? 0
}

describe.each(Object.keys(SHEETS) as Sheet[])('the %s on paper', (sheet) => {
  it('has neither navigation nor buttons, and says where it came from', async () => {
    await open(sheet)
    const { page } = opened
    // On the screen they are there, or their absence on paper would prove nothing.
    expect(await page.getByRole('button', { name: 'Print' }).isVisible()).toBe(true)
    expect(await page.getByRole('navigation', { name: 'Index', exact: true }).isVisible()).toBe(true)
    await page.emulateMedia({ media: 'print' })
    const left = await page.evaluate(() => [...document.querySelectorAll<HTMLElement>('nav, button, .btn, input, select')]
      .filter(element => element.checkVisibility() && element.getBoundingClientRect().width > 1)
      .map(element => element.outerHTML.slice(0, 80)))
    expect(left).toEqual([])
    const address = page.locator('.spine .address')
    expect(await address.isVisible()).toBe(true)
    expect(await address.innerText()).toBe(page.url())
    const head = await page.locator('.titleblock').innerText()
    for (const known of ['Harrow Fell', '12 Sep 2026', 'No. 47', 'Nell Placeholder']) expect(head).toContain(known)
  })

  it('is ink on paper, whatever the sheet is on the screen', async () => {
    await open(sheet)
    const { page } = opened
    await page.evaluate(() => document.documentElement.setAttribute('data-sheet', 'dark'))
    const colours = () => page.evaluate(() => [document.documentElement, document.querySelector('h1')!]
      .flatMap((element, i) => i === 0 ? getComputedStyle(element).backgroundColor : getComputedStyle(element).color))
    const dark = await colours()
    await page.emulateMedia({ media: 'print' })
    expect(await colours()).toEqual(['rgb(255, 255, 255)', 'rgb(0, 0, 0)'])
    expect(dark).not.toEqual(['rgb(255, 255, 255)', 'rgb(0, 0, 0)'])
  })

  it('fits the width of A4: no table and no chart is cut', async () => {
    await open(sheet)
    const { page } = opened
    await page.setViewportSize({ width: PAPER_PX, height: 1000 })
    await page.emulateMedia({ media: 'print' })
    const wide = await page.evaluate(() => [...document.querySelectorAll('table, svg, h1, dl')]
      .map(element => ({ what: element.outerHTML.slice(0, 60), right: element.getBoundingClientRect().right }))
      .filter(({ right }) => right > document.documentElement.clientWidth + 1))
    await page.setViewportSize({ width: 1440, height: 1000 })
    expect(wide).toEqual([])
  })

  it(`takes ${SHEETS[sheet]} page${SHEETS[sheet] === 1 ? '' : 's'}`, async () => {
    await open(sheet)
    // A medium that is emulated would be printed, too.
    await opened.page.emulateMedia({ media: null })
    const pdf = await opened.page.pdf({ preferCSSPageSize: true })
    expect(pageCount(pdf)).toBe(SHEETS[sheet])
    // 210 by 297 mm in points, as the style of print asks for.
    expect(pdf.toString('latin1')).toMatch(/\/MediaBox\s*\[0 0 59[45](\.\d+)? 84[12](\.\d+)?\]/)
  })
})

it('asks the browser to print when it is touched', async () => {
  await open('outing')
  const { page } = opened
  await page.evaluate(() => {
    window.print = () => document.body.setAttribute('data-printed', 'yes')
  })
  await page.getByRole('button', { name: 'Print' }).click()
  expect(await page.locator('body').getAttribute('data-printed')).toBe('yes')
})

it('draws the traces for the paper, with figures of the size of print', async () => {
  await open('comparison')
  const { page } = opened
  const size = () => page.evaluate(() => {
    const svg = document.querySelector('.trace-chart svg')!
    return svg.getAttribute('viewBox')!.split(' ').map(Number)
  })
  const [, , screen] = await size()
  await page.evaluate(() => window.dispatchEvent(new Event('beforeprint')))
  const [, , paper] = await size()
  await page.evaluate(() => window.dispatchEvent(new Event('afterprint')))
  expect(screen).toBeGreaterThan(900)
  expect(paper).toBe(PAPER_PX + 1)
  expect((await size())[2]).toBe(screen)
})
