import { Validator } from '@seriousme/openapi-schema-validator'
import { Ajv2020 } from 'ajv/dist/2020.js'
import addFormats from 'ajv-formats'
import { readdirSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Knex } from 'knex'
import type { NewToken, Token } from '../../shared/schemas/tokens'
import { makeClient, type Client } from '../../seeds/client'
import { connect } from '../support/database'
import { baseUrl, fixture, fixtureLines, garage, lapsOf, PASSWORD, register, saveLines, uploadAndRead, type Garage } from '../support/team'

interface Operation {
  operationId: string
  summary: string
  security: unknown[]
  responses: Record<string, { content?: Record<string, { schema: object }> }>
}
interface Document { openapi: string, paths: Record<string, Record<string, Operation>>, components: object }

let owner: Knex
let own: Garage
let document: Document

beforeAll(async () => {
  owner = connect('owner')
  own = await garage()
  document = await makeClient(baseUrl()).must<Document>('GET', '/api/openapi.json')
})

afterAll(() => owner.destroy())

/** The routes as files, in the words of the document: `get /api/days/{id}`. */
function routeFiles(): string[] {
  const folder = fileURLToPath(new URL('../../server/api', import.meta.url))
  return readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts') && name !== '[...].ts')
    .map((name) => {
      const [, path, method] = /^(.*)\.(get|post|put|patch|delete)\.ts$/.exec(name)!
      return `${method} /api/${path!.replace(/(^|\/)index$/, '').replace(/\[(\w+)\]/g, '{$1}')}`
    }).sort()
}

describe('the description of the interface', () => {
  it('is a valid document of OpenAPI 3.1', async () => {
    expect(document.openapi).toMatch(/^3\.1\./)
    const judged = await new Validator().validate(structuredClone(document) as never)
    expect(judged.errors ?? []).toEqual([])
    expect(judged.valid).toBe(true)
  })

  it('names every route there is, each with its sentence and a name of its own', () => {
    const named = Object.entries(document.paths).flatMap(([path, operations]) => Object.keys(operations).map(method => `${method} ${path}`))
    expect(named.sort()).toEqual(routeFiles())
    const operations = Object.values(document.paths).flatMap(each => Object.values(each))
    expect(new Set(operations.map(each => each.operationId)).size).toBe(operations.length)
    for (const each of operations) expect(each.summary, each.operationId).toMatch(/^[A-Z].{8,}\.$/)
  })

  it('asks for a token or a session wherever a stranger is turned away', async () => {
    const stranger = makeClient(baseUrl())
    for (const [path, { get }] of Object.entries(document.paths)) {
      if (!get || get.operationId.endsWith('events')) continue
      const { status } = await stranger.send('GET', path.replace('{id}', own.dayId))
      expect(status === 401, `${path} answered ${status}`).toBe(get.security.length > 0)
    }
  })

  it('describes what the routes really answer, to the last property', async () => {
    await saveLines(own, fixtureLines('harrow-fell-lines.geojson'))
    const log = await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
    const laps = (await lapsOf(own, own.outingId)).filter(lap => lap.kind === 'timed')
    const team = `?teamId=${own.teamId}`
    const asked = {
      '/api/health': '', '/api/me': '', '/api/tokens': '', '/api/members': team, '/api/circuits': team, '/api/layouts': team,
      '/api/cars': team, '/api/days': team,
      '/api/circuits/{id}': own.circuitId, '/api/layouts/{id}': own.layoutId, '/api/layouts/{id}/logs': own.layoutId,
      '/api/cars/{id}': own.carId, '/api/setups/{id}': own.setupId, '/api/days/{id}': own.dayId, '/api/outings/{id}': own.outingId,
      '/api/logs/{id}': log.id, '/api/logs/{id}/trace': log.id, '/api/laps': `${team}&layoutId=${own.layoutId}`,
      '/api/compare': `?lap=${laps[0]!.id}&against=${laps[1]!.id}`,
    }
    const silent = Object.keys(document.paths).filter(path => document.paths[path]!.get && !(path in asked))
    expect(silent).toEqual(['/api/logs/{id}/events', '/api/openapi.json'])
    const ajv = addFormats.default(new Ajv2020({ strict: false, allErrors: true }))
    for (const [path, which] of Object.entries(asked)) {
      const url = path.includes('{id}') ? path.replace('{id}', which) : path + which
      const answer = await own.client.must('GET', url)
      const { schema } = document.paths[path]!.get!.responses['200']!.content!['application/json']!
      const fits = ajv.compile(schema)
      expect(fits(answer) ? [] : fits.errors, path).toEqual([])
    }
  })
})

async function makeToken(client: Client, body: object = {}): Promise<NewToken> {
  return client.must<NewToken>('POST', '/api/tokens', { name: 'Laptop', password: PASSWORD, ...body })
}

function withToken(path: string, token: string, init: RequestInit = {}): Promise<Response> {
  return fetch(baseUrl() + path, { ...init, headers: { authorization: `Bearer ${token}`, ...init.headers } })
}

describe('a personal token', () => {
  it('is told once, kept as a hash alone, and says when it was last used', async () => {
    const { client } = await register()
    const made = await makeToken(client, { expiresInDays: null })
    expect(made.token).toMatch(/^lw_[\w-]{43}$/)
    const list = await client.must<{ items: Token[] }>('GET', '/api/tokens')
    expect(list.items).toMatchObject([{ id: made.id, ending: made.token.slice(-4), lastUsedAt: null, expiresAt: null }])
    expect(JSON.stringify(list)).not.toContain(made.token)
    const kept = await owner('api_tokens').where('id', made.id).first()
    expect(JSON.stringify(kept)).not.toContain(made.token.slice(3, -4))
    expect((await withToken('/api/me', made.token)).status).toBe(200)
    const [used] = (await client.must<{ items: Token[] }>('GET', '/api/tokens')).items
    expect(Date.now() - Date.parse(used!.lastUsedAt!)).toBeLessThan(60_000)
  })

  it('opens what its person may do, uploads among it, and nothing of others', async () => {
    const { token } = await makeToken(own.client)
    const other = await garage()
    const form = new FormData()
    form.append('file', new Blob([fixture('short-loop.csv')]), 'short-loop.csv')
    expect((await withToken(`/api/outings/${own.outingId}/logs`, token, { method: 'POST', body: form })).status).toBe(201)
    expect((await withToken(`/api/days/${other.dayId}`, token)).status).toBe(404)
  })

  it('is refused once it was revoked or has expired', async () => {
    const { client } = await register()
    const [revoked, expired] = [await makeToken(client), await makeToken(client, { expiresInDays: 30 })]
    expect(Math.round((Date.parse(expired.expiresAt!) - Date.now()) / 86_400_000)).toBe(30)
    expect((await client.send('DELETE', `/api/tokens/${revoked.id}`)).status).toBe(204)
    await owner('api_tokens').where('id', expired.id).update({ expires_at: new Date(Date.now() - 1000) })
    for (const { token } of [revoked, expired]) {
      const answer = await withToken('/api/me', token)
      expect(answer.status).toBe(401)
      expect(answer.headers.get('www-authenticate')).toContain('Bearer')
      expect(answer.headers.get('content-type')).toBe('application/problem+json')
    }
  })

  it('counts alone when it is sent: a wrong one is not made good by a session', async () => {
    const { client } = await register()
    const wrong = { authorization: 'Bearer lw_nobody', cookie: client.cookie() }
    expect((await fetch(`${baseUrl()}/api/me`, { headers: wrong })).status).toBe(401)
    // The scheme of a proxy before us says nothing about who this is.
    expect((await fetch(`${baseUrl()}/api/me`, { headers: { ...wrong, authorization: 'Basic bmVsbA==' } })).status).toBe(200)
  })

  it('cannot make another one, nor can an open browser: the password is asked', async () => {
    const { client } = await register()
    const { token } = await makeToken(client)
    const body = JSON.stringify({ name: 'Second', password: 'a wrong password' })
    const headers = { 'content-type': 'application/json' }
    const answer = await withToken('/api/tokens', token, { method: 'POST', body, headers })
    expect(answer.status).toBe(422)
    expect(await answer.json()).toMatchObject({ errors: [{ path: 'password' }] })
  })

  it('is its person’s own: others neither see nor revoke it, in the database either', async () => {
    const [one, other] = [await register(), await register()]
    const { id } = await makeToken(one.client)
    expect((await other.client.send('DELETE', `/api/tokens/${id}`)).status).toBe(404)
    expect((await other.client.must<{ items: Token[] }>('GET', '/api/tokens')).items).toEqual([])
    const app = connect('application')
    try {
      await app.transaction(async (db) => {
        await db.raw('select set_config(\'lapwright.user_id\', ?, true)', [other.me.id])
        expect(await db('api_tokens').where('id', id).select('id')).toEqual([])
        expect(await db('api_tokens').where('id', id).delete()).toBe(0)
        await expect(db('api_tokens').select('hash')).rejects.toThrow(/permission denied/)
      })
    }
    finally {
      await app.destroy()
    }
  })

  it('outlives a new password, which ends the sessions', async () => {
    const { client } = await register()
    const { token } = await makeToken(client)
    await client.must('POST', '/api/password', { currentPassword: PASSWORD, newPassword: 'another long password' })
    expect((await withToken('/api/me', token)).status).toBe(200)
  })
})
