import { describe, expect, it } from 'vitest'
import { editionOf, serverEnv, SERVERS } from '../../../../scripts/lib/servers.mjs'

const settings = {
  LAPWRIGHT_PORT: '3100', LAPWRIGHT_WORKER_PORT: '3101', DATABASE_URL: 'postgres://a', DATABASE_OWNER_URL: 'postgres://o',
}

describe('serverEnv', () => {
  it.each([['web', '3100'], ['worker', '3101']])('gives %s its role and port', (role, port) => {
    const server = SERVERS.find(each => each.role === role)!
    expect(serverEnv(settings, server)).toMatchObject({ LAPWRIGHT_ROLES: role, NITRO_PORT: port, DATABASE_URL: 'postgres://a' })
  })

  it('keeps the owner\'s access to the database from both', () => {
    for (const server of SERVERS) expect(serverEnv(settings, server).DATABASE_OWNER_URL).toBeUndefined()
  })
})

describe('editionOf', () => {
  it('changes with the build and with a setting, not with the order of settings', () => {
    const edition = editionOf('b1', { A: '1', B: '2' })
    expect(editionOf('b1', { B: '2', A: '1' })).toBe(edition)
    expect(editionOf('b2', { A: '1', B: '2' })).not.toBe(edition)
    expect(editionOf('b1', { A: '1', B: '3' })).not.toBe(edition)
  })
})
