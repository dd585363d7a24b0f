import { createHash } from 'node:crypto'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Me } from '../../shared/schemas/people'
import type { Token } from '../../shared/schemas/tokens'
import { makeClient } from '../../seeds/client'
import { connect } from '../support/database'
import { baseUrl, makeToken, PASSWORD, register, type Registered } from '../support/team'

let owner: Knex

beforeAll(() => {
  owner = connect('owner')
})
afterAll(() => owner.destroy())

const asToken = (token: string, cookie = '') => makeClient(baseUrl(), cookie, token)
const statusWith = async (token: string, cookie = '') => (await asToken(token, cookie).send('GET', '/api/me')).status
const listOf = async ({ client }: Registered) => (await client.must<{ items: Token[] }>('GET', '/api/tokens')).items

describe('a token', () => {
  it('speaks for the person who made it, and for nobody else', async () => {
    const [one, other] = [await register('Nell Placeholder'), await register('Bo Testcase')]
    const [ofOne, ofOther] = [await makeToken(one), await makeToken(other)]
    expect((await asToken(ofOne.token).must<Me>('GET', '/api/me')).id).toBe(one.me.id)
    expect((await asToken(ofOther.token).must<Me>('GET', '/api/me')).id).toBe(other.me.id)
    // A token counts before a cookie: whose it is, not whose browser it came from.
    expect((await asToken(ofOne.token, other.client.cookie()).must<Me>('GET', '/api/me')).id).toBe(one.me.id)
  })

  it.each([[null, null], [30, 30], [90, 90], [365, 365]])('that may live %s days ends then', async (expiresInDays, days) => {
    const { client } = await register()
    const made = await client.must<Token>('POST', '/api/tokens', { name: 'T', expiresInDays, password: PASSWORD })
    const livesDays = made.expiresAt && (Date.parse(made.expiresAt) - Date.parse(made.createdAt)) / 86_400_000
    expect(livesDays).toBe(days)
  })

  it('may live no other number of days', async () => {
    const { client } = await register()
    const { status, body } = await client.send<Problem>('POST', '/api/tokens', { name: 'T', expiresInDays: 36_500, password: PASSWORD })
    expect([status, body.errors?.map(error => error.path)]).toEqual([400, ['expiresInDays']])
  })

  it('notes when it was last used, at most once a minute', async () => {
    const person = await register()
    const { id, token } = await makeToken(person)
    const used = async () => (await owner('api_tokens').where('id', id).first<{ last_used_at: Date | null }>('last_used_at')).last_used_at
    expect(await used()).toBeNull()
    await statusWith(token)
    const first = await used()
    expect(Math.abs(Date.now() - first!.getTime())).toBeLessThan(60_000)
    await statusWith(token)
    expect(await used()).toEqual(first)
    await owner('api_tokens').where('id', id).update({ last_used_at: owner.raw('now() - interval \'61 seconds\'') })
    await statusWith(token)
    expect((await used())!.getTime()).toBeGreaterThanOrEqual(first!.getTime())
    expect((await listOf(person))[0]!.lastUsedAt).toBe((await used())!.toISOString())
  })
})

/** What is refused once it was removed or has expired, and whom a password is asked, stands in interface.spec.ts. */
describe('a token is refused, with a good session beside it too,', () => {
  it.each([
    ['nothing', ''], ['a word', 'nonsense'], ['the form of one', `lw_${'A'.repeat(43)}`], ['a NUL as hex', 'lw_%00'],
  ])('when it is %s', async (_, token) => {
    const person = await register()
    const response = await fetch(`${baseUrl()}/api/me`, {
      headers: { authorization: `Bearer ${token}`, cookie: person.client.cookie() },
    })
    expect(response.status).toBe(401)
    expect(response.headers.get('www-authenticate')).toMatch(/^Bearer\b/)
  })

  it('when it is the hash that is stored, and not the token', async () => {
    const person = await register()
    const { token } = await makeToken(person)
    expect(await statusWith(createHash('sha256').update(token).digest('hex'), person.client.cookie())).toBe(401)
  })
})

describe('a request from a page of another site', () => {
  it('is turned away with a cookie, which browsers send unasked, and not with a token', async () => {
    const person = await register()
    const { token } = await makeToken(person)
    const post = (headers: Record<string, string>) => fetch(`${baseUrl()}/api/cars?teamId=${person.teamId}`, {
      method: 'POST', body: JSON.stringify({ name: `No. ${Object.keys(headers)[0]}` }),
      headers: { 'content-type': 'application/json', 'sec-fetch-site': 'cross-site', ...headers },
    })
    expect((await post({ cookie: person.client.cookie() })).status).toBe(403)
    expect((await post({ authorization: `Bearer ${token}` })).status).toBe(201)
  })
})
