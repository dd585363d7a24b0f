import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Knex } from 'knex'
import { connect } from '../support/database'
import { fixture, fixtureLines, garage, register, saveLines, uploadAndRead, type Garage, type Registered } from '../support/team'

/** Tables that hold rows of a team, and how a row of another team would be written into each. */
const TENANT_TABLES = ['circuits', 'layouts', 'timing_lines', 'cars', 'setup_revisions', 'track_days', 'outings', 'logs', 'log_parts', 'column_maps', 'channels', 'laps', 'lap_sectors', 'memberships', 'teams', 'users'] as const

let application: Knex
let owner: Knex
let own: Garage
let stranger: Registered

beforeAll(async () => {
  application = connect('application')
  owner = connect('owner')
  own = await garage()
  stranger = await register('Iggy Sample')
  await saveLines(own, fixtureLines('harrow-fell-lines.geojson'))
  await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
})

afterAll(async () => {
  await application.destroy()
  await owner.destroy()
})

function as<T>(userId: string | null, run: (db: Knex.Transaction) => Promise<T>): Promise<T> {
  return application.transaction(async (db) => {
    if (userId) await db.raw('select set_config(\'lapwright.user_id\', ?, true)', [userId])
    return run(db)
  })
}

const VISIBLE = { users: ['id', 'name', 'email'] } as Record<string, string[] | undefined>

describe('the schema', () => {
  it('has row-level security on every table of public, and no table of the application’s role', async () => {
    const { rows } = await owner.raw(`select relname, relrowsecurity, pg_get_userbyid(relowner) as owner from pg_class
      where relnamespace = 'public'::regnamespace and relkind in ('r', 'p') and relname not like 'knex_%'`)
    expect(rows.length).toBeGreaterThanOrEqual(TENANT_TABLES.length)
    expect(rows.filter((row: { relrowsecurity: boolean }) => !row.relrowsecurity)).toEqual([])
    expect(new Set(rows.map((row: { owner: string }) => row.owner))).toEqual(new Set(['lapwright_owner']))
    const tables = rows.map((row: { relname: string }) => row.relname).filter((name: string) => !/_\d$/.test(name))
    expect(tables.sort()).toEqual([...TENANT_TABLES].sort())
  })

  it('gives the application a role without power over the rules', async () => {
    const { rows: [role] } = await owner.raw('select rolsuper, rolbypassrls, rolcreaterole, rolcreatedb from pg_roles where rolname = \'lapwright_app\'')
    expect(role).toEqual({ rolsuper: false, rolbypassrls: false, rolcreaterole: false, rolcreatedb: false })
    await expect(application.raw('create table mine (id int)')).rejects.toThrow(/permission denied/)
    await expect(application.raw('alter table laps disable row level security')).rejects.toThrow(/must be owner/)
    await expect(application.raw('select password_hash from users')).rejects.toThrow(/permission denied/)
  })

  it('stores samples out of line and uncompressed in every partition', async () => {
    const { rows } = await owner.raw('select attstorage from pg_attribute where attname = \'samples\' and attrelid in (select inhrelid from pg_inherits where inhparent = \'channels\'::regclass)')
    expect(rows.length).toBe(8)
    expect(new Set(rows.map((row: { attstorage: string }) => row.attstorage))).toEqual(new Set(['e']))
  })

  it('keeps the application away from the partitions themselves', async () => {
    const { rows } = await owner.raw('select inhrelid::regclass::text as name from pg_inherits where inhparent in (\'channels\'::regclass, \'laps\'::regclass, \'lap_sectors\'::regclass)')
    expect(rows.length).toBe(24)
    for (const { name } of rows) await expect(application.raw(`select * from ${name}`), name).rejects.toThrow(/permission denied/)
  })
})

describe('without a person, and as a stranger', () => {
  const who = () => [['nobody', null], ['a stranger', stranger.me.id]] as const

  it('shows no row of the team', async () => {
    for (const [name, id] of who()) {
      for (const table of TENANT_TABLES) {
        const rows = await as(id, db => db(table).select(VISIBLE[table] ?? ['*']))
        const foreign = rows.filter((row: Record<string, unknown>) =>
          row.team_id === own.teamId || row.id === own.teamId || row.id === own.me.id)
        expect(foreign, `${name} reads ${table}`).toEqual([])
      }
    }
    // The owner of the rows sees some in every table, so the emptiness above is no accident.
    for (const table of TENANT_TABLES) {
      const rows = await as(own.me.id, db => db(table).select(VISIBLE[table] ?? ['*']).limit(1))
      expect(rows.length, `the owner reads ${table}`).toBe(1)
    }
  })

  it('changes and removes nothing', async () => {
    const before = await counts()
    for (const [name, id] of who()) {
      for (const table of TENANT_TABLES.filter(item => !['users', 'teams', 'memberships'].includes(item))) {
        expect(await as(id, db => db(table).where('team_id', own.teamId).delete()), `${name} removes from ${table}`).toBe(0)
      }
      expect(await as(id, db => db('circuits').update({ notes: 'mine' })), name).toBe(0)
      expect(await as(id, db => db('laps').where('team_id', own.teamId).update({ excluded: true, excluded_reason: 'x' })), name).toBe(0)
      expect(await as(id, db => db('memberships').where('team_id', own.teamId).update({ role: 'coach' })), name).toBe(0)
    }
    expect(await counts()).toEqual(before)
  })

  it('adds nothing to the team', async () => {
    for (const [name, id] of who()) {
      const attempts: [string, object][] = [
        ['circuits', { team_id: own.teamId, name: 'Elsewhere', time_zone: 'UTC' }],
        ['cars', { team_id: own.teamId, name: 'Another' }],
        ['track_days', { team_id: own.teamId, circuit_id: own.circuitId, date: '2026-01-01' }],
        ['memberships', { team_id: own.teamId, user_id: stranger.me.id, role: 'owner' }],
        ['laps', { team_id: own.teamId, outing_id: own.outingId, number: 1, kind: 'timed', start_s: 0, time_s: 60 }],
      ]
      for (const [table, row] of attempts) {
        await expect(as(id, db => db(table).insert(row)), `${name} adds to ${table}`).rejects.toThrow(/row-level security/)
      }
    }
  })

  it('does not answer functions of a person to nobody', async () => {
    expect(await as(null, async db => (await db.raw('select app.my_password_hash() as hash')).rows)).toEqual([{ hash: null }])
  })

  async function counts(): Promise<Record<string, number>> {
    const found: Record<string, number> = {}
    for (const table of TENANT_TABLES) {
      const column = table === 'teams' ? 'id' : table === 'users' ? 'id' : 'team_id'
      const value = table === 'users' ? own.me.id : own.teamId
      found[table] = Number((await owner(table).where(column, value).count('* as n'))[0]!.n)
    }
    return found
  }
})

describe('roles at the database', () => {
  it('lets a coach read and not write, and crew write outings but no circuits', async () => {
    for (const [role, table, row, allowed] of [
      ['coach', 'cars', { name: 'Coach’s car' }, false],
      ['crew', 'cars', { name: 'Crew’s car' }, true],
      ['crew', 'circuits', { name: 'Crew’s circuit', time_zone: 'UTC' }, false],
      ['driver', 'circuits', { name: 'Driver’s circuit', time_zone: 'UTC' }, true],
      ['driver', 'memberships', { user_id: stranger.me.id, role: 'owner' }, false],
    ] as const) {
      const member = await register(`A ${role}`)
      await owner('memberships').insert({ team_id: own.teamId, user_id: member.me.id, role })
      expect((await as(member.me.id, db => db('laps').where('team_id', own.teamId).select('id'))).length, role).toBeGreaterThan(5)
      const excluded = await as(member.me.id, db => db('laps').where('team_id', own.teamId).update({ excluded: true, excluded_reason: 'x' }))
      expect(excluded > 0, `${role} excludes laps`).toBe(role === 'driver')
      expect((await as(member.me.id, db => db('outings').where('team_id', own.teamId).select('id'))).length, role).toBe(1)
      const write = as(member.me.id, db => db(table).insert({ team_id: own.teamId, ...row }))
      if (allowed) await write
      else await expect(write, `${role} writes ${table}`).rejects.toThrow(/row-level security/)
    }
  })

  it('shows a member who has left nothing any more', async () => {
    const member = await register('Gone Again')
    await owner('memberships').insert({ team_id: own.teamId, user_id: member.me.id, role: 'driver', left_at: new Date() })
    expect(await as(member.me.id, db => db('cars').where('team_id', own.teamId).select('id'))).toEqual([])
  })
})

describe('references across teams', () => {
  it('cannot be made, even by a person of both teams', async () => {
    const other = await garage()
    await owner('memberships').insert({ team_id: own.teamId, user_id: other.me.id, role: 'owner' })
    const attempts: [string, object][] = [
      ['layouts', { team_id: own.teamId, circuit_id: other.circuitId, name: 'Crossed' }],
      ['setup_revisions', { team_id: own.teamId, car_id: other.carId, number: 9, name: 'Crossed', sheet: '{}' }],
      ['track_days', { team_id: own.teamId, circuit_id: other.circuitId, date: '2026-01-01' }],
      ['outings', { team_id: own.teamId, day_id: own.dayId, circuit_id: own.circuitId, number: 9, layout_id: other.layoutId, car_id: own.carId, setup_revision_id: own.setupId, driver_id: own.me.id }],
      ['outings', { team_id: own.teamId, day_id: own.dayId, circuit_id: own.circuitId, number: 9, layout_id: own.layoutId, car_id: other.carId, setup_revision_id: other.setupId, driver_id: own.me.id }],
      ['outings', { team_id: own.teamId, day_id: own.dayId, circuit_id: own.circuitId, number: 9, layout_id: own.layoutId, car_id: own.carId, setup_revision_id: own.setupId, driver_id: stranger.me.id }],
      ['log_parts', { team_id: own.teamId, log_id: (await owner('logs').where('team_id', own.teamId).first('id')).id, outing_id: other.outingId }],
      ['laps', { team_id: own.teamId, outing_id: other.outingId, number: 1, kind: 'timed', start_s: 0, time_s: 60 }],
    ]
    for (const [table, row] of attempts) {
      await expect(as(other.me.id, db => db(table).insert(row)), JSON.stringify(row)).rejects.toThrow(/foreign key/)
    }
  })
})
