/**
 * Takes the pictures of README.md from the demonstration team of a running server.
 *
 * LAPWRIGHT_TEST_URL: the server; LAPWRIGHT_DEMO_FILE: the sign-ins that the seed wrote.
 */
import { mkdirSync, readFileSync } from 'node:fs'
import process from 'node:process'
import { fileURLToPath } from 'node:url'
import { makeClient } from '../seeds/client'
import type { Me } from '../shared/schemas/people'
import type { Day, Lap } from '../shared/schemas/days'
import { launch, openWindow, type SIZES } from '../tests/support/browser'
import { baseUrl } from '../tests/support/team'

const FOLDER = fileURLToPath(new URL('../public/pictures/', import.meta.url))

interface Picture { name: string, path: string, size?: keyof typeof SIZES }

function best(laps: readonly Lap[]): Lap {
  return laps.filter(lap => lap.kind === 'timed').reduce((a, b) => b.timeS < a.timeS ? b : a)
}

const { signIns } = JSON.parse(readFileSync(process.env.LAPWRIGHT_DEMO_FILE!, 'utf8')) as
  { signIns: { email: string, password: string }[] }
const client = makeClient(baseUrl())
const me = await client.must<Me>('POST', '/api/sign-in', { email: signIns[0]!.email, password: signIns[0]!.password })
const days = await client.must<{ items: { id: string }[] }>('GET', `/api/days?teamId=${me.teams[0]!.id}`)
const day = await client.must<Day>('GET', `/api/days/${days.items.at(-1)!.id}`)
const [first, second] = day.outings

const PICTURES: Picture[] = [
  { name: 'day', path: `/days/${day.id}` },
  { name: 'laps', path: `/outings/${second!.id}` },
  { name: 'lines', path: `/layouts/${first!.layout.id}` },
  { name: 'compare', path: `/compare?lap=${best(second!.laps).id}&against=${best(first!.laps).id}` },
  { name: 'setup', path: `/setups/${second!.setup.id}` },
  { name: 'laps-phone', path: `/outings/${second!.id}`, size: 'phone' },
]

mkdirSync(FOLDER, { recursive: true })
const browser = await launch()
try {
  for (const { name, path, size = 'desk' } of PICTURES) {
    const { context, page, complaints } = await openWindow(browser, size, client.cookie())
    await page.goto(path, { waitUntil: 'networkidle' })
    await page.evaluate(() => document.fonts.ready)
    if (complaints.length) throw new Error(`${name}: ${complaints.join('; ')}`)
    await page.screenshot({ path: `${FOLDER}${name}.png` })
    await context.close()
  }
}
finally {
  await browser.close()
}
