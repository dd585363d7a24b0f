import { createHash } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Browser, Page } from 'playwright-core'
import { axe, launch, layoutFaults, openWindow } from '../support/browser'
import { addMember, connect } from '../support/database'
import { fixture, fixtureLines, garage, PASSWORD, register, saveLines, uploadAndRead, type Garage } from '../support/team'

let browser: Browser
let own: Garage

beforeAll(async () => {
  browser = await launch()
  own = await garage()
  await saveLines(own, fixtureLines('harrow-fell-lines.geojson'))
  await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
})

afterAll(() => browser.close())

const press = (page: Page, name: string | RegExp) => page.getByRole('button', { name }).click()
const focused = (page: Page) => page.evaluate(() => document.activeElement?.textContent?.trim() ?? '')

describe('removing what was made by mistake', () => {
  it('is refused with the reason and the page that helps while something stands on it', async () => {
    const { page, context } = await openWindow(browser, 'desk', own.client.cookie())
    await page.goto(`/cars/${own.carId}`, { waitUntil: 'networkidle' })
    await press(page, 'Remove this car')
    await page.keyboard.press('Enter')
    const alert = page.getByRole('alert').filter({ hasText: '1 outing was driven in this car, on 12 September 2026' })
    await alert.waitFor()
    expect(await focused(page)).toBe('Remove this car')
    expect(await axe(page)).toEqual([])
    await alert.getByRole('link', { name: 'Open that outing' }).click()
    await page.waitForURL(`**/outings/${own.outingId}`)
    await context.close()
  })

  it.each(['desk', 'phone'] as const)('asks, can be kept by Escape, and goes back to the list with the focus on what was done (%s)', async (size) => {
    const { id } = await own.client.must<{ id: string }>('POST', `/api/cars?teamId=${own.teamId}`, { name: `Twice on a ${size}` })
    const { page, context, complaints } = await openWindow(browser, size, own.client.cookie())
    await page.goto(`/cars/${id}`, { waitUntil: 'networkidle' })
    await press(page, 'Remove this car')
    expect(await focused(page)).toBe('Remove the car')
    expect([...await axe(page), ...await layoutFaults(page)]).toEqual([])
    await page.keyboard.press('Escape')
    expect(await focused(page)).toBe('Remove this car')
    await page.keyboard.press('Enter')
    await page.keyboard.press('Enter')
    await page.waitForURL('**/cars')
    await page.getByRole('status').filter({ hasText: `Twice on a ${size} is removed.` }).waitFor()
    expect(await focused(page)).toBe(`Twice on a ${size} is removed.`)
    expect([...await axe(page), ...await layoutFaults(page), ...complaints]).toEqual([])
    await page.getByRole('link', { name: 'No. 47' }).click()
    await page.waitForURL(`**/cars/${own.carId}`)
    expect(await page.getByText('is removed.').count()).toBe(0)
    await context.close()
  })

  it('of an outing says which log goes with it, and then the day, the layout and the circuit can go', async () => {
    const { page, context } = await openWindow(browser, 'desk', own.client.cookie())
    await page.goto(`/outings/${own.outingId}`, { waitUntil: 'networkidle' })
    await press(page, 'Remove this outing')
    await page.getByText(/and with it its log and \d+ laps: harrow-fell\.csv\./).waitFor()
    await press(page, 'Remove the outing')
    await page.waitForURL(`**/days/${own.dayId}`)
    await page.getByRole('status').filter({ hasText: 'Outing 1 is removed.' }).waitFor()
    await press(page, 'Remove this day')
    await press(page, 'Remove the day')
    await page.waitForURL('**/days')
    await page.goto(`/circuits/${own.circuitId}`, { waitUntil: 'networkidle' })
    await press(page, 'Correct Full circuit')
    await press(page, 'Remove this layout')
    await press(page, 'Remove the layout')
    await page.getByRole('heading', { level: 1, name: 'Harrow Fell has no layout yet.' }).waitFor()
    await press(page, 'Remove this circuit')
    await press(page, 'Remove the circuit')
    await page.waitForURL('**/circuits')
    expect(await focused(page)).toBe('Harrow Fell is removed.')
    await context.close()
  })

  it('is not offered to whoever may not', async () => {
    const other = await garage()
    const owner = connect('owner')
    const crew = await register('A crew')
    await owner('memberships').where('user_id', crew.me.id).update({ left_at: new Date() })
    await addMember(owner, other.teamId, crew.me.id, 'crew')
    await owner.destroy()
    const { page, context } = await openWindow(browser, 'desk', crew.client.cookie())
    await page.goto(`/cars/${other.carId}`, { waitUntil: 'networkidle' })
    expect(await page.getByRole('button', { name: /Remove|Correct/ }).count()).toBe(0)
    expect(await page.getByRole('link', { name: /Write revision/ }).count()).toBe(1)
    await page.goto(`/outings/${other.outingId}`, { waitUntil: 'networkidle' })
    expect(await page.getByRole('button', { name: 'Remove this outing' }).count()).toBe(1)
    await context.close()
  })
})

describe('limits', () => {
  const fill = async (key: string, points: number) => {
    const owner = connect('owner')
    await owner('app.attempts').insert({ key, points, expire: Date.now() + 420_000 })
    await owner.destroy()
  }

  it('say on the sign-in page when to try again, with what was typed still there', async () => {
    const { email } = await register()
    await fill(`person:${createHash('sha256').update(email).digest('hex')}`, 10)
    const { page, context } = await openWindow(browser, 'phone')
    await page.goto('/sign-in', { waitUntil: 'networkidle' })
    await page.getByLabel('E-mail address').fill(email)
    await page.getByLabel('Password').fill(PASSWORD)
    await press(page, 'Sign in')
    await page.getByRole('alert').filter({ hasText: 'too many wrong passwords for this account. Try again in 7 minutes.' }).waitFor()
    expect(await page.getByLabel('E-mail address').inputValue()).toBe(email)
    expect([...await axe(page), ...await layoutFaults(page)]).toEqual([])
    await context.close()
  })

  it('say in the list of uploads when to send it again, which can be done', async () => {
    const other = await garage()
    await fill(`upload:${other.teamId}`, 1_000_000)
    const { page, context } = await openWindow(browser, 'desk', other.client.cookie())
    await page.goto(`/outings/${other.outingId}`, { waitUntil: 'networkidle' })
    await page.locator('input[type=file]').setInputFiles({ name: 'a.csv', mimeType: 'text/csv', buffer: fixture('short-loop.csv') })
    await page.getByRole('alert').filter({ hasText: /send this one again in 7 minutes/ }).waitFor()
    const owner = connect('owner')
    await owner('app.attempts').where('key', `upload:${other.teamId}`).delete()
    await owner.destroy()
    await press(page, 'Try again')
    await page.waitForURL('**/logs/*')
    await context.close()
  })
})
