import { spawn } from 'node:child_process'
import { createHash, randomUUID } from 'node:crypto'
import path from 'node:path'
import process from 'node:process'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import { waitFor } from '../../seeds/client'
import { connect } from '../support/database'
import { newNetwork } from '../support/network'
import { baseUrl, fixture, garage, PASSWORD, register } from '../support/team'

const PERSON_ATTEMPTS = 10
const NETWORK_ATTEMPTS = 60
const UPLOADS = Number(process.env.LAPWRIGHT_UPLOADS_PER_HOUR ?? 240)

let owner: Knex

beforeAll(() => {
  owner = connect('owner')
})

afterAll(() => owner.destroy())

const personKey = (email: string) => `person:${createHash('sha256').update(email).digest('hex')}`
const points = async (key: string) => (await owner('app.attempts').where('key', key).first<{ points: number } | undefined>())?.points ?? 0
const setPoints = (key: string, value: number, expire = Date.now() + 420_000) =>
  owner('app.attempts').insert({ key, points: value, expire }).onConflict('key').merge({ points: value, expire })

async function post(route: string, body: object, from: string, cookie = '') {
  const response = await fetch(baseUrl() + route, {
    method: 'POST', body: JSON.stringify(body), headers: { 'content-type': 'application/json', 'x-forwarded-for': `198.51.100.1, ${from}`, cookie },
  })
  const text = await response.text()
  return { status: response.status, headers: response.headers, body: (text ? JSON.parse(text) : null) as Problem }
}

const signIn = (email: string, password: string, from: string) => post('/api/sign-in', { email, password }, from)

describe('wrong passwords', () => {
  it.each([['an account', true], ['an address without one', false]])('are looked at ten times for %s, then not at all for a while', async (_what, known) => {
    const email = known ? (await register()).email : `${randomUUID()}@lapwright.example`
    const { address } = newNetwork()
    for (let i = 0; i < PERSON_ATTEMPTS; i++) expect((await signIn(email, 'not the password', address)).status).toBe(401)
    const refused = await signIn(email, PASSWORD, newNetwork().address)
    expect(refused.status).toBe(429)
    expect(refused.headers.get('content-type')).toBe('application/problem+json')
    const waitS = Number(refused.headers.get('retry-after'))
    expect(waitS).toBeGreaterThan(870)
    expect(waitS).toBeLessThanOrEqual(900)
    expect(refused.body.detail).toMatch(/Try again in 15 minutes\.$/)
  })

  it('of many at the same moment do not pass the limit together', async () => {
    const { email } = await register()
    await setPoints(personKey(email), PERSON_ATTEMPTS - 2)
    const { address } = newNetwork()
    const answers = await Promise.all(Array.from({ length: 6 }, () => signIn(email, 'not the password', address)))
    expect(answers.map(answer => answer.status).sort()).toEqual([401, 401, 429, 429, 429, 429])
  })

  it('count on beside right ones, which do not count', async () => {
    const { email } = await register()
    const { address, key } = newNetwork()
    await setPoints(personKey(email), PERSON_ATTEMPTS - 1)
    expect((await signIn(email.toUpperCase(), PASSWORD, address)).status).toBe(200)
    expect(await points(personKey(email))).toBe(PERSON_ATTEMPTS - 1)
    expect(await points(key)).toBe(0)
    expect((await signIn(email, 'not the password', address)).status).toBe(401)
    const refused = await signIn(email, PASSWORD, address)
    expect(refused.status).toBe(429)
    expect(refused.body.detail).toContain('in 7 minutes')
  })

  it('are forgotten when their time is over', async () => {
    const { email } = await register()
    await setPoints(personKey(email), PERSON_ATTEMPTS + 5, Date.now() - 1)
    expect((await signIn(email, PASSWORD, newNetwork().address)).status).toBe(200)
  })

  it('are counted for the whole network from which they come, and for no other', async () => {
    const { email } = await register()
    const { address, neighbour, key } = newNetwork()
    await setPoints(key, NETWORK_ATTEMPTS - 1)
    expect((await signIn(`${randomUUID()}@lapwright.example`, 'not the password', address)).status).toBe(401)
    const refused = await signIn(email, PASSWORD, neighbour)
    expect([refused.status, refused.headers.get('retry-after')]).toEqual([429, expect.stringMatching(/^4[12]\d$/)])
    expect(await points(personKey(email))).toBe(0)
    expect((await signIn(email, PASSWORD, newNetwork().address)).status).toBe(200)
  })

  it('leave no e-mail address in the counters', async () => {
    const { email } = await register()
    await signIn(email, 'not the password', newNetwork().address)
    expect(await points(personKey(email))).toBe(1)
    const keys = (await owner('app.attempts').select<{ key: string }[]>('key')).map(row => row.key)
    expect(keys.filter(key => key.includes('@'))).toEqual([])
  })

  it('for a new password are of the same counter, and count though nothing is changed', async () => {
    const { client, email } = await register()
    const { address } = newNetwork()
    const change = (currentPassword: string) =>
      post('/api/password', { currentPassword, newPassword: 'another long password' }, address, client.cookie())
    await setPoints(personKey(email), PERSON_ATTEMPTS - 2)
    expect((await change('not the password')).status).toBe(422)
    expect(await points(personKey(email))).toBe(PERSON_ATTEMPTS - 1)
    expect((await signIn(email, 'not the password', address)).status).toBe(401)
    const refused = await change(PASSWORD)
    expect([refused.status, refused.headers.get('retry-after')]).toEqual([429, expect.stringMatching(/^4[12]\d$/)])
    expect((await client.send('GET', '/api/me')).status).toBe(200)
  })
})

describe('uploads of a team', () => {
  const csv = () => `# ${randomUUID()}\n${fixture('short-loop.csv').toString()}`

  it('are taken up to the limit of an hour, told when to go on, and taken again afterwards', async () => {
    const own = await garage()
    const key = `upload:${own.teamId}`
    const send = () => own.client.upload<Problem & { id: string }>(`/api/outings/${own.outingId}/logs`, 'a.csv', csv())
    await setPoints(key, UPLOADS - 1)
    expect((await send()).status).toBe(201)
    const refused = await send()
    expect(refused.status).toBe(429)
    expect(refused.headers.get('retry-after')).toMatch(/^4[12]\d$/)
    expect(refused.body.detail).toMatch(new RegExp(`${UPLOADS} files an hour.*in 7 minutes`))
    const other = await garage()
    expect((await other.client.upload(`/api/outings/${other.outingId}/logs`, 'a.csv', csv())).status).toBe(201)
    await setPoints(key, UPLOADS + 1, Date.now() - 1)
    expect((await send()).status).toBe(201)
    expect((await owner('logs').where('team_id', own.teamId).select('id')).length).toBe(2)
  })

  it('of many bytes are told so as well, and not cut off', async () => {
    const own = await garage()
    await setPoints(`upload:${own.teamId}`, UPLOADS)
    const large = new Uint8Array(8_000_000).fill(48)
    expect((await own.client.upload<Problem>(`/api/outings/${own.outingId}/logs`, 'a.csv', large)).status).toBe(429)
  })
})

describe('the counters', () => {
  it('are swept by the worker when their time is over', async () => {
    const [old, young] = [`person:${randomUUID()}`, `person:${randomUUID()}`]
    await setPoints(old, 3, Date.now() - 1)
    await setPoints(young, 3)
    const worker = spawn(process.execPath, [path.join(process.env.LAPWRIGHT_OUTPUT_DIR!, 'server/index.mjs')], {
      env: { ...process.env, NODE_ENV: 'production', NITRO_HOST: '127.0.0.1', NITRO_PORT: '0', LAPWRIGHT_ROLES: 'worker' },
      stdio: 'ignore',
    })
    try {
      await waitFor('the sweep', async () => await points(old) === 0, 30_000)
      expect(await points(young)).toBe(3)
    }
    finally {
      worker.kill('SIGTERM')
      await new Promise(resolve => worker.once('exit', resolve))
    }
  })

  it('refuse to start with a limit that is no number', async () => {
    const server = spawn(process.execPath, [path.join(process.env.LAPWRIGHT_OUTPUT_DIR!, 'server/index.mjs')], {
      env: { ...process.env, NODE_ENV: 'production', NITRO_HOST: '127.0.0.1', NITRO_PORT: '0', LAPWRIGHT_UPLOADS_PER_HOUR: 'many' },
    })
    let said = ''
    server.stderr.on('data', chunk => (said += chunk))
    expect(await new Promise(resolve => server.once('exit', resolve))).toBe(1)
    expect(said).toContain('LAPWRIGHT_UPLOADS_PER_HOUR is "many"; it takes a whole number from 1.')
  })
})
