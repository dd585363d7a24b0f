import { execFile } from 'node:child_process'
import { readFileSync } from 'node:fs'
import process from 'node:process'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Day, Lap } from '../../shared/schemas/days'
import type { NewToken } from '../../shared/schemas/tokens'
import { baseUrl, fixture, fixtureLines, garage, PASSWORD, saveLines, type Garage } from '../support/team'

const run = promisify(execFile)
/** Mostly the reading of the log, which other tests ask of the same worker. */
const LONGEST_MS = 150_000
const root = fileURLToPath(new URL('../../', import.meta.url))

/** The scripts of README.md's section for programs. What is fenced as `sh` there are settings to fill in. */
function readmeScripts(): string[] {
  const section = /^## For programs\n([\s\S]*?)^## /m.exec(readFileSync(`${root}README.md`, 'utf8'))?.[1] ?? ''
  return [...section.matchAll(/^```bash\n([\s\S]*?)^```$/gm)].map(match => match[1]!)
}

interface Cell { cell_type: string, source: string[] }

/** All code of the notebook, one cell after the other. */
function notebookCode(): string {
  const { cells } = JSON.parse(fixture('laps.ipynb').toString()) as { cells: Cell[] }
  return cells.filter(cell => cell.cell_type === 'code').map(cell => cell.source.join('')).join('\n\n')
}

/** Runs text with a program from the project's folder, as somebody who has set address and token. */
async function runWith(program: string, text: string, token: string): Promise<string> {
  const env = { PATH: process.env.PATH, LANG: 'C.UTF-8', LAPWRIGHT_URL: baseUrl(), LAPWRIGHT_TOKEN: token }
  // Node's pipes are sockets, at which bash reads the settings of whoever runs the test.
  const words = program === 'bash' ? ['--norc', '-c', text] : ['-c', text]
  const { stdout } = await run(program, words, { cwd: root, env, timeout: LONGEST_MS })
  return stdout
}

let team: Garage
let token: string

beforeAll(async () => {
  team = await garage()
  await saveLines(team, fixtureLines('harrow-fell-lines.geojson'))
  const body = { name: 'laptop', expiresInDays: 30, password: PASSWORD }
  token = (await team.client.must<NewToken>('POST', '/api/tokens', body)).token
})

async function outingsOfDay(): Promise<Day['outings']> {
  return (await team.client.must<Day>('GET', `/api/days/${team.dayId}`)).outings
}

const clock = (seconds: number) => {
  const ms = Math.round(seconds * 1000)
  return `${Math.floor(ms / 60_000)}:${(ms % 60_000 / 1000).toFixed(3).padStart(6, '0')}`
}

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  return (sorted[Math.floor((sorted.length - 1) / 2)]! + sorted[Math.ceil((sorted.length - 1) / 2)]!) / 2
}

describe('what README.md tells programs', () => {
  it('sends a log and reads its laps back', { timeout: LONGEST_MS + 10_000 }, async () => {
    const [script, ...others] = readmeScripts()
    expect(others).toEqual([])
    const printed = await runWith('bash', script!, token)
    const outings = await outingsOfDay()
    expect(outings.map(outing => outing.number)).toEqual([1, 2])
    const { laps } = outings[1]!
    expect(laps.filter(lap => lap.kind === 'timed').length).toBeGreaterThan(5)
    expect(printed.trim().split('\n')).toEqual([
      'The log is ready.',
      ...laps.map((lap: Lap) => `${lap.number} ${lap.kind} ${lap.timeS.toFixed(3)}`),
    ])
  })

  it('stops with the problem where something is wrong', async () => {
    const failed = await runWith('bash', readmeScripts()[0]!, 'lw_not_a_token').catch((error: unknown) => error)
    expect(failed).toMatchObject({ code: expect.not.stringMatching(/^0$/) as unknown, stdout: '' })
    expect((failed as { stderr: string }).stderr).toMatch(/401/)
    expect(await outingsOfDay()).toHaveLength(2)
  })

  it('reads laps in the notebook: best and median of each outing', async () => {
    const printed = (await runWith('python3', notebookCode(), token)).trim().split('\n')
    const times = (await outingsOfDay())[1]!.laps.filter(lap => lap.kind === 'timed').map(lap => lap.timeS)
    // An outing without laps has no line.
    expect(printed).toHaveLength(2)
    expect(printed[0]!.split(/ {2,}/)).toEqual(['day', 'circuit', 'outing', 'laps', 'best', 'median'])
    expect(printed[1]!.split(/ {2,}/)).toEqual([
      '2026-09-12', 'Harrow Fell', '2', String(times.length), clock(Math.min(...times)), clock(median(times)),
    ])
  })
})
