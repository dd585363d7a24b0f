import { describe, expect, it } from 'vitest'
import type { Problem } from '../../shared/schemas/common'
import type { Me } from '../../shared/schemas/people'
import { makeClient } from '../../seeds/client'
import { baseUrl, PASSWORD, register } from '../support/team'

describe('registration', () => {
  it('makes the person and a team of their own, and signs them in', async () => {
    const { client, email } = await register('Bo Testcase')
    const me = await client.must<Me>('GET', '/api/me')
    expect(me).toMatchObject({ name: 'Bo Testcase', email, teams: [{ name: 'Team of Bo Testcase', role: 'owner' }] })
  })

  it('says which fields need a look', async () => {
    const { status, body, headers } = await makeClient(baseUrl()).send<Problem>('POST', '/api/register', { name: ' ', email: 'nowhere', password: 'short', teamName: 'A' })
    expect(status).toBe(400)
    expect(headers.get('content-type')).toBe('application/problem+json')
    expect(body.errors?.map(error => error.path).sort()).toEqual(['email', 'name', 'password'])
  })

  it('tells that an address has an account, whatever its capitals', async () => {
    const { email } = await register()
    const { status, body } = await makeClient(baseUrl()).send<Problem>('POST', '/api/register', { name: 'Bo', email: email.toUpperCase(), password: PASSWORD, teamName: 'B' })
    expect(status).toBe(409)
    expect(body.errors).toMatchObject([{ path: 'email' }])
  })
})

describe('signing in', () => {
  it('takes the right password and no other, and answers alike for an unknown address', async () => {
    const { email } = await register()
    const client = makeClient(baseUrl())
    const wrong = await client.send<Problem>('POST', '/api/sign-in', { email, password: 'not the password' })
    const unknown = await client.send<Problem>('POST', '/api/sign-in', { email: `nobody-${email}`, password: PASSWORD })
    expect([wrong.status, unknown.status]).toEqual([401, 401])
    expect(unknown.body.detail).toBe(wrong.body.detail)
    expect((await client.send('POST', '/api/sign-in', { email, password: PASSWORD })).status).toBe(200)
    expect((await client.send('GET', '/api/me')).status).toBe(200)
  })

  it('ends with signing out', async () => {
    const { client } = await register()
    expect((await client.send('POST', '/api/sign-out')).status).toBe(204)
    expect((await client.send('GET', '/api/me')).status).toBe(401)
  })

  it('gives a cookie that scripts cannot read and other sites do not send', async () => {
    const { email } = await register()
    const response = await fetch(`${baseUrl()}/api/sign-in`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify({ email, password: PASSWORD }) })
    const cookie = response.headers.getSetCookie().find(set => set.startsWith('lapwright='))
    expect(cookie).toMatch(/HttpOnly/i)
    expect(cookie).toMatch(/SameSite=Lax/i)
  })
})

describe('a new password', () => {
  it('ends every other session and leaves this one', async () => {
    const { client, email } = await register()
    const elsewhere = makeClient(baseUrl())
    await elsewhere.must('POST', '/api/sign-in', { email, password: PASSWORD })
    const changed = await client.send('POST', '/api/password', { currentPassword: PASSWORD, newPassword: 'another long password' })
    expect(changed.status).toBe(204)
    expect((await elsewhere.send('GET', '/api/me')).status).toBe(401)
    expect((await elsewhere.send('GET', '/api/_auth/session')).status).toBe(401)
    expect((await client.send('GET', '/api/me')).status).toBe(200)
    expect((await elsewhere.send('POST', '/api/sign-in', { email, password: PASSWORD })).status).toBe(401)
    expect((await elsewhere.send('POST', '/api/sign-in', { email, password: 'another long password' })).status).toBe(200)
  })

  it('is refused without the present one', async () => {
    const { client } = await register()
    const { status, body } = await client.send<Problem>('POST', '/api/password', { currentPassword: 'guessed wrongly', newPassword: 'another long password' })
    expect(status).toBe(422)
    expect(body.errors).toMatchObject([{ path: 'currentPassword' }])
    expect((await client.send('GET', '/api/me')).status).toBe(200)
  })
})

describe('the body of a request', () => {
  const post = (body: string, type = 'application/json', extra: Record<string, string> = {}) =>
    fetch(`${baseUrl()}/api/sign-in`, { method: 'POST', body, headers: { 'content-type': type, ...extra } })

  it('must be JSON, whole, and not endless', async () => {
    expect((await post('{}', 'text/plain')).status).toBe(415)
    expect((await post('{"email": ')).status).toBe(400)
    expect((await post(JSON.stringify({ email: 'x'.repeat(1_100_000) }))).status).toBe(413)
  })

  it('is not taken from a page of another site', async () => {
    expect((await post('{}', 'application/json', { 'sec-fetch-site': 'cross-site' })).status).toBe(403)
  })
})
