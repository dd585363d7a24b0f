import process from 'node:process'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { axe, launch, layoutFaults, openWindow, SIZES } from '../support/browser'
import { connect } from '../support/database'
import { begun, whileRead } from '../support/job-in-the-middle'
import { ownServers, type OwnServers } from '../support/own-servers'
import { fixture, fixtureLines, garage, PASSWORD, saveLines, uploadAndRead, type Garage } from '../support/team'

let own: OwnServers
let browser: Browser
let owner: Knex
const sizes = Object.keys(SIZES) as (keyof typeof SIZES)[]

beforeAll(async () => {
  own = await ownServers('e2e')
  browser = await launch()
  owner = connect('owner')
}, 120_000)

afterAll(async () => {
  await browser?.close()
  await owner?.destroy()
  await own?.stop()
})

const press = (page: Page, name: string | RegExp) => page.getByRole('button', { name }).click()
const sound = async (page: Page) => [...await axe(page), ...await layoutFaults(page)]
const csv = (name: string, buffer: Buffer | string) => ({ name, mimeType: 'text/csv', buffer: Buffer.from(buffer) })
const choose = (page: Page, ...files: ReturnType<typeof csv>[]) => page.locator('input[type=file]').setInputFiles(files)

/** The person signs in again in another tab of the same browser. */
async function signInElsewhere(context: BrowserContext, page: Page, email: string) {
  const opened = context.waitForEvent('page')
  await page.getByRole('alert').getByRole('link').click()
  const tab = await opened
  await tab.waitForLoadState('networkidle')
  await tab.getByLabel('E-mail address').fill(email)
  await tab.getByLabel('Password').fill(PASSWORD)
  await press(tab, 'Sign in')
  await tab.waitForURL(url => !url.pathname.startsWith('/sign-in'))
  await tab.close()
}

describe('the back button', () => {
  it('in the middle of a new sheet loses nothing of what was typed', async () => {
    const of = await garage()
    const { page, context } = await openWindow(browser, 'desk', of.client.cookie())
    await page.goto('/cars', { waitUntil: 'networkidle' })
    await page.goto('/cars/new', { waitUntil: 'networkidle' })
    await page.getByLabel('Name').fill('Typed and not saved')
    page.on('dialog', dialog => void dialog.accept())
    await page.goBack({ waitUntil: 'networkidle' })
    await page.goForward({ waitUntil: 'networkidle' })
    await page.waitForFunction(() => [...document.querySelectorAll('input')].some(input => input.value === 'Typed and not saved'))
    await context.close()
  })

  it('in the middle of a correction loses nothing of what was typed', async () => {
    const of = await garage()
    const { page, context } = await openWindow(browser, 'desk', of.client.cookie())
    await page.goto(`/outings/${of.outingId}`, { waitUntil: 'networkidle' })
    await page.getByRole('link', { name: 'Change what is written here' }).click()
    await page.waitForURL('**/edit')
    await page.getByLabel('Notes').fill('Rain from the third lap on')
    // Corrections keep a draft: nothing is asked, and it comes back.
    await page.goBack()
    await page.waitForURL(`**/outings/${of.outingId}`)
    await page.goForward()
    await page.getByLabel('Notes').waitFor()
    await expect.poll(() => page.getByLabel('Notes').inputValue()).toBe('Rain from the third lap on')
    await context.close()
  })

  it('in the middle of an upload asks first; who stays sees it arrive', async () => {
    const of = await garage()
    const { page, context } = await openWindow(browser, 'phone', of.client.cookie())
    let go = () => {}
    const held = new Promise<void>(resolve => (go = resolve))
    await page.route('**/api/outings/*/logs', async (route) => {
      await held
      await route.continue()
    })
    await page.goto(`/days/${of.dayId}`, { waitUntil: 'networkidle' })
    await page.locator(`a[href="/outings/${of.outingId}"]`).first().click()
    // The sheet of the day takes files, too: not before it has gone.
    await page.getByRole('heading', { level: 1, name: 'Outing 1 has no log yet.' }).waitFor()
    await choose(page, csv('a.csv', fixture('short-loop.csv')))
    await page.getByText(/^sending, |^sent; /).first().waitFor()
    const asked = page.waitForEvent('dialog')
    const back = page.goBack({ waitUntil: 'commit' }).catch(() => null)
    const dialog = await asked
    expect(dialog.message()).toMatch(/still on its way/)
    await dialog.dismiss()
    await back
    await expect.poll(() => page.url()).toMatch(/\/outings\//)
    go()
    await page.waitForURL('**/logs/*')
    await page.getByRole('button', { name: 'Use these columns' }).waitFor()
    await context.close()
  })
})

describe('a session that has ended', () => {
  it.each(sizes)('in the middle of a form: signed in again in another tab, it is saved, with nothing lost (%s)', async (size) => {
    const of = await garage()
    const { page, context } = await openWindow(browser, size, of.client.cookie())
    await page.goto('/cars/new', { waitUntil: 'networkidle' })
    await page.getByLabel('Name').fill('No. 12')
    await context.clearCookies()
    await press(page, 'Add the car')
    const alert = page.getByRole('alert').filter({ hasText: 'You are not signed in any more.' })
    await alert.waitFor()
    expect(await alert.innerText()).toMatch(/What you typed is still here/)
    expect(await sound(page)).toEqual([])
    await signInElsewhere(context, page, of.email)
    expect(await page.getByLabel('Name').inputValue()).toBe('No. 12')
    await press(page, 'Add the car')
    await page.waitForURL(/\/cars\/[0-9a-f-]{36}/)
    await context.close()
  })

  it('in the middle of an upload: the file stays chosen, and goes after signing in in another tab', async () => {
    const of = await garage()
    const { page, context } = await openWindow(browser, 'desk', of.client.cookie())
    await page.goto(`/outings/${of.outingId}`, { waitUntil: 'networkidle' })
    await context.clearCookies()
    await choose(page, csv('a.csv', fixture('short-loop.csv')))
    await page.getByRole('alert').filter({ hasText: 'You are not signed in any more.' }).waitFor()
    await signInElsewhere(context, page, of.email)
    await press(page, 'Try again')
    await page.waitForURL('**/logs/*')
    await context.close()
  })
})

describe('the list of files', () => {
  it.each(sizes)('keeps those that were refused, each with its reason, and offers the cut ones again (%s)', async (size) => {
    const of = await garage()
    const { page, context } = await openWindow(browser, size, of.client.cookie())
    await page.goto(`/outings/${of.outingId}`, { waitUntil: 'networkidle' })
    await choose(page,
      csv('nothing.csv', ''), csv('photo.csv', fixture('picture.csv')), csv('words.csv', 'It rained all day.\nTomorrow, perhaps.\n'),
      csv('cut.csv.gz', Buffer.from('1f8b0800000000000003', 'hex')))
    const list = page.getByRole('list', { name: 'Files being sent' })
    const says = (file: string, words: RegExp) => list.getByRole('listitem').filter({ hasText: file }).filter({ hasText: words }).waitFor()
    await says('nothing.csv', /empty/)
    await says('photo.csv', /picture|image/i)
    await says('words.csv', /No table/)
    await says('cut.csv.gz', /cannot be unpacked/)
    expect(await sound(page)).toEqual([])
    await shoot(page, `refused-${size}`)
    expect(await list.getByRole('listitem').count()).toBe(4)

    await page.route('**/api/outings/*/logs', route => route.abort('connectionreset'))
    await choose(page, csv('late.csv', fixture('short-loop.csv')))
    await says('late.csv', /The connection was cut\..*still chosen/)
    await shoot(page, `cut-${size}`)
    await page.unroute('**/api/outings/*/logs')
    await press(page, 'Try again')
    await page.waitForURL('**/logs/*')
    await context.close()
  })

  it('of the outing keeps a log that the worker refused, with its reason; and the outing says what was wrong in rows', async () => {
    const of = await garage()
    const header = 'time (s),latitude,longitude'
    const refused = await uploadAndRead(of, of.outingId, 'words.csv', `${header}\n${'1.0,54.4,-2.9\n'.repeat(30)}`)
    const rows = Array.from({ length: 300 }, (_, i) => `${i / 10},${54.4 + i / 1e5},${i === 99 ? 'west' : -2.9}`)
    await uploadAndRead(of, of.outingId, 'faulty.csv', `${header}\n${rows.join('\n')}\n`)
    for (const size of sizes) {
      const { page, context } = await openWindow(browser, size, of.client.cookie())
      await page.goto(`/outings/${of.outingId}`, { waitUntil: 'networkidle' })
      const entry = (file: string) => page.getByRole('listitem').filter({ hasText: file })
      expect(await entry('words.csv').innerText()).toContain(refused.problem!.message)
      expect(await entry('faulty.csv').innerText()).toMatch(/Something was wrong in 1 row\. See which/)
      expect(await sound(page)).toEqual([])
      await shoot(page, `outing-${size}`)
      await page.getByRole('link', { name: 'See which' }).click()
      await page.getByText('row 101', { exact: true }).waitFor()
      await context.close()
    }
  })
})

describe('two logs of one outing', () => {
  it.each(sizes)('say which laps count, and each lap from which log it is (%s)', async (size) => {
    const of = await garage()
    await saveLines(of, fixtureLines('harrow-fell-lines.geojson'))
    const text = fixture('harrow-fell.csv').toString()
    await uploadAndRead(of, of.outingId, 'first.csv', text)
    await uploadAndRead(of, of.outingId, 'second.csv', `# the other logger\n${text}`)
    const { page, context, complaints } = await openWindow(browser, size, of.client.cookie())
    await page.goto(`/outings/${of.outingId}`, { waitUntil: 'networkidle' })
    await page.getByText(/\d+ laps of second\.csv do not count/).waitFor()
    expect(await page.getByRole('row').filter({ hasText: 'from second.csv; the log added first counts' }).count()).toBeGreaterThan(5)
    expect(await page.getByRole('row').filter({ hasText: 'from first.csv' }).count()).toBeGreaterThan(5)
    expect([...await sound(page), ...complaints]).toEqual([])
    await shoot(page, `two-logs-${size}`)
    await context.close()
  })
})

describe('processes that are lost under an open page', () => {
  it.each(sizes)('a worker: the page of the log says that the reading begins again, and shows it done (%s)', async (size) => {
    const of = await begun()
    const { page, context } = await openWindow(browser, size, of.client.cookie())
    await whileRead(owner, of, async () => {
      await page.goto(`/logs/${of.logId}`, { waitUntil: 'domcontentloaded' })
      await page.getByText(/Cutting it into laps|Being read/).first().waitFor()
      process.kill(own.pidOf('worker'), 'SIGKILL')
    })
    await page.getByText('The reading broke off, through no fault of the file, and begins again by itself.').waitFor({ timeout: 30_000 })
    await shoot(page, `worker-lost-${size}`)
    await page.getByRole('link', { name: 'The laps of outing 1' }).waitFor({ timeout: 30_000 })
    await context.close()
  })

  it('a web process while a file is sent: the file stays chosen and can be sent again', async () => {
    const of: Garage = await garage()
    const { page, context } = await openWindow(browser, 'phone', of.client.cookie())
    await page.goto(`/outings/${of.outingId}`, { waitUntil: 'networkidle' })
    // Stopped first, so that the upload is under way when it dies.
    const lost = own.pidOf('web')
    process.kill(lost, 'SIGSTOP')
    await choose(page, csv('a.csv', fixture('harrow-fell.csv')))
    await page.getByText(/^sending, |^sent; /).first().waitFor()
    process.kill(lost, 'SIGKILL')
    await page.getByRole('alert').filter({ hasText: 'The connection was cut.' }).waitFor()
    await expect.poll(async () => (await fetch(`${own.url}/api/health`).catch(() => null))?.status, { timeout: 20_000 }).toBe(200)
    await press(page, 'Try again')
    await page.waitForURL('**/logs/*')
    await context.close()
  })

  it('the database: the sheet says to try again, what was typed stays, and the next press saves it', async () => {
    const of: Garage = await garage()
    const { page, context } = await openWindow(browser, 'phone', of.client.cookie())
    await page.goto('/cars/new', { waitUntil: 'networkidle' })
    await page.getByLabel('Name').fill('No. 31')
    const { page: other } = await openWindow(browser, 'desk', of.client.cookie())
    await own.stopDatabase()
    try {
      await press(page, 'Add the car')
      await page.getByRole('alert').filter({ hasText: /try again in some seconds/ }).waitFor()
      expect(await sound(page)).toEqual([])
      await shoot(page, 'database-away-form')
      await other.goto(`/days/${of.dayId}`, { waitUntil: 'networkidle' })
      await other.getByRole('heading', { name: 'The book is closed for a moment.' }).waitFor()
      await shoot(other, 'database-away-page')
    }
    finally {
      await own.startDatabase()
    }
    expect(await page.getByLabel('Name').inputValue()).toBe('No. 31')
    await press(page, 'Add the car')
    await page.waitForURL(/\/cars\/[0-9a-f-]{36}/)
    await press(other, 'Try again')
    await other.getByText('Harrow Fell').first().waitFor()
    await context.close()
    await other.context().close()
  })
})

/** A picture for whoever wants to look, when LAPWRIGHT_SHOTS names a folder. */
async function shoot(page: Page, name: string) {
  const folder = process.env.LAPWRIGHT_SHOTS
  if (folder) await page.screenshot({ path: `${folder}/${name}.png`, fullPage: true })
}
