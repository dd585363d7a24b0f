/**
 * How pages and their routes answer: while the worker reads a log of 15 MB, against the same with an idle worker; and
 * how long a person waits from the sign-in button to a page of 200 laps.
 */
import type { Browser } from 'playwright-core'
import type { Log, Outing } from '../../shared/schemas/days'
import { confirmColumns, settled, uploadLog } from '../../seeds/upload'
import { launch } from '../../tests/support/browser'
import { needed, percentile99, rounded, tell } from './figures'
import { longLog, makeTeam, type Team } from './ground'

const GROUP = 'pages'
const baseUrl = needed('LAPWRIGHT_TEST_URL')
const LAPS = 200
const RATE_PER_S = 50
const MEASURE_S = 20
const LOG_BYTES = 15_000_000
const SIGN_INS = 7

const sleep = (ms: number) => new Promise(resolve => setTimeout(resolve, Math.max(0, ms)))

/**
 * Sends requests at a steady rate, whether or not earlier ones have been answered, and counts each from the moment at
 * which it was due: an answer that waits behind a slow one is slow too.
 * @returns milliseconds of those requests that were due while `counts` said so
 */
async function load(
  paths: readonly string[],
  cookie: string,
  seconds: number,
  counts: () => boolean,
): Promise<number[]> {
  const taken: number[] = []
  const waiting: Promise<void>[] = []
  const began = performance.now()
  for (let i = 0; i < seconds * RATE_PER_S; i++) {
    const due = began + i * 1000 / RATE_PER_S
    await sleep(due - performance.now())
    const counted = counts()
    waiting.push(fetch(baseUrl + paths[i % paths.length]!, { headers: { cookie } }).then(async (response) => {
      await response.arrayBuffer()
      if (response.status !== 200) throw new Error(`${paths[i % paths.length]} answered ${response.status}`)
      if (counted) taken.push(performance.now() - due)
    }))
  }
  await Promise.all(waiting)
  return taken
}

/** Has a log read again and again until told to stop; `busy` says whether the worker is at it. */
function keepReading(team: Team, logId: string) {
  const state = { busy: false, stop: false, readings: 0 }
  const done = (async () => {
    while (!state.stop) {
      await confirmColumns(team.client, logId)
      state.busy = true
      const { status, problem } = await settled(team.client, logId)
      state.busy = false
      if (status !== 'ready') throw new Error(`the log came out ${status}: ${problem?.message}`)
      state.readings++
    }
  })()
  return { state, done }
}

async function measureStall(team: Team, outing: Outing, bytesPerLap: number): Promise<void> {
  const timed = outing.laps.filter(lap => lap.kind === 'timed')
  const pairs = timed.slice(0, 20).map((lap, i) => `/api/compare?lap=${lap.id}&against=${timed.at(-1 - i)!.id}`)
  const list = `/api/laps?teamId=${team.teamId}&layoutId=${team.layoutId}`
  const paths = pairs.flatMap(pair => [list, pair])
  const cookie = team.client.cookie()
  await load(paths, cookie, 3, () => false)
  const idle = await load(paths, cookie, MEASURE_S, () => true)
  const csv = longLog(Math.ceil(LOG_BYTES / bytesPerLap), 10, 41)
  const log = await uploadLog(team.client, await team.addOuting(), 'long.csv', csv)
  const { state, done } = keepReading(team, log.id)
  const busy = await load(paths, cookie, MEASURE_S, () => state.busy)
  state.stop = true
  await done
  const p99 = percentile99(busy), idleP99 = percentile99(idle)
  const what = `${rounded(csv.length / 1e6)} MB log read ${state.readings} times, ${busy.length} requests, ${RATE_PER_S} a second`
  tell({ group: GROUP, figure: 'stall_p99_ms', value: rounded(p99), unit: 'ms', baseline: `idle worker: ${rounded(idleP99)} ms; ${what}` })
  tell({ group: GROUP, figure: 'stall_p99_vs_idle', value: rounded(p99 / idleP99, 2), unit: 'ratio', baseline: 'same percentile with an idle worker' })
}

/** From the press of the sign-in button to the last row of the laps, in a browser that has seen nothing yet. */
async function signInOnce(browser: Browser, team: Team, outingId: string): Promise<{ ms: number, bytes: number }> {
  const context = await browser.newContext({ viewport: { width: 1440, height: 1000 }, baseURL: baseUrl })
  try {
    const page = await context.newPage()
    const session = await context.newCDPSession(page)
    await session.send('Network.enable')
    let bytes = 0
    session.on('Network.loadingFinished', ({ encodedDataLength }) => {
      bytes += encodedDataLength
    })
    await page.goto(`/sign-in?back=${encodeURIComponent(`/outings/${outingId}`)}`, { waitUntil: 'networkidle' })
    await page.getByLabel('E-mail').fill(team.email)
    await page.getByLabel('Password').fill(team.password)
    const began = performance.now()
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.waitForFunction(laps => document.querySelectorAll('tbody tr').length >= laps, LAPS)
    await page.evaluate(() => new Promise(resolve => requestAnimationFrame(() => requestAnimationFrame(resolve))))
    const ms = performance.now() - began
    await page.waitForLoadState('networkidle')
    return { ms, bytes }
  }
  finally {
    await context.close()
  }
}

async function measureSignIn(team: Team, outingId: string): Promise<void> {
  const browser = await launch()
  try {
    await signInOnce(browser, team, outingId)
    const runs = []
    for (let i = 0; i < SIGN_INS; i++) runs.push(await signInOnce(browser, team, outingId))
    const times = runs.map(run => run.ms).sort((a, b) => a - b)
    const [best, median, worst] = [times[0]!, times[(SIGN_INS - 1) / 2]!, times.at(-1)!]
    tell({ group: GROUP, figure: 'sign_in_to_laps_ms', value: rounded(median), unit: 'ms',
      baseline: `median of ${SIGN_INS} fresh browsers, ${rounded(best)} to ${rounded(worst)} ms; to be under 1000 ms; ${LAPS} laps` })
    tell({ group: GROUP, figure: 'sign_in_to_laps_kb', value: rounded(runs[0]!.bytes / 1000), unit: 'kB',
      baseline: 'all bytes from the empty browser to the page of laps' })
  }
  finally {
    await browser.close()
  }
}

const team = await makeTeam(baseUrl)
const outingId = await team.addOuting()
const csv = longLog(LAPS, 10, 1)
const log: Log = await uploadLog(team.client, outingId, 'two-hundred-laps.csv', csv)
if (log.status !== 'ready') throw new Error(`the log came out ${log.status}`)
const outing = await team.client.must<Outing>('GET', `/api/outings/${outingId}`)
await measureStall(team, outing, csv.length / LAPS)
await measureSignIn(team, outingId)
