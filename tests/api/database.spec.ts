import { randomBytes } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Knex } from 'knex'
import { may, type Action } from '../../shared/access'
import { ROLES, type Role } from '../../shared/schemas/common'
import { connect } from '../support/database'
import { fixture, fixtureLines, garage, makeToken, register, saveLines, uploadAndRead, type Garage, type Registered } from '../support/team'

/** Who may do what with the rows of their own team, and a row that would be written. */
interface Rule {
  /** Everybody of the team when not said. */
  read?: readonly Role[]
  add: readonly Role[]
  change: readonly Role[]
  remove: readonly Role[]
  row: (of: Garage) => object | Promise<object>
  set: object
}

/** The roles that the one table of the program allows this, which the policies must agree with. */
const who = (action: Action) => ROLES.filter(role => may(role, action))
const writers = (action: Action) => ({ add: who(action), change: who(action), remove: who(action) })
/** Written by the jobs of the team alone. */
const JOBS = { add: [], change: [], remove: [] }

const place = { a_latitude_deg: 54, a_longitude_deg: -3, b_latitude_deg: 54, b_longitude_deg: -3.001 }
const firstId = async (table: 'logs' | 'laps', of: Garage) =>
  (await owner(table).where('team_id', of.teamId).first<{ id: string }>('id')).id
const driven = (of: Garage) => ({
  team_id: of.teamId, circuit_id: of.circuitId, day_id: of.dayId, layout_id: of.layoutId, car_id: of.carId,
  setup_revision_id: of.setupId, driver_id: of.me.id,
})

/** Every table that holds rows of people. One that is missing here fails the test of the schema. */
const RULES = {
  circuits: { ...writers('circuits.write'), row: of => ({ team_id: of.teamId, name: 'Tarn Moor', time_zone: 'UTC' }), set: { notes: 'x' } },
  layouts: { ...writers('circuits.write'), row: of => ({ team_id: of.teamId, circuit_id: of.circuitId, name: 'Short' }), set: { direction: 'clockwise' } },
  timing_lines: { ...writers('lines.write'), row: of => ({ team_id: of.teamId, layout_id: of.layoutId, kind: 'sector', ordinal: 9, ...place }), set: place },
  cars: { ...writers('cars.write'), row: of => ({ team_id: of.teamId, name: 'Another' }), set: { notes: 'x' } },
  setup_revisions: { ...writers('setups.write'), row: of => ({ team_id: of.teamId, car_id: of.carId, number: 99, name: 'x', sheet: '{}' }), set: { name: 'x' } },
  track_days: { ...writers('days.write'), row: of => ({ team_id: of.teamId, circuit_id: of.circuitId, date: '2026-01-01' }), set: { notes: 'x' } },
  outings: { ...writers('outings.write'), row: of => ({ ...driven(of), number: 99 }), set: { notes: 'x' } },
  logs: { ...writers('logs.write'), row: of => ({ team_id: of.teamId, file_name: 'x', storage_key: `${of.teamId}/x` }), set: { file_name: 'x' } },
  log_parts: { ...writers('logs.write'), row: async of => ({ team_id: of.teamId, log_id: await firstId('logs', of), outing_id: of.outingId }), set: { clock_offset_s: 1 } },
  column_maps: { ...writers('logs.write'), row: of => ({ team_id: of.teamId, header_key: 'x', column_map: '{}' }), set: { column_map: '{}' } },
  channels: { ...JOBS, row: async of => ({ team_id: of.teamId, log_id: await firstId('logs', of), name: 'x', ordinal: 99, label: '', unit: '', rate_hz: 1, encoding: 'f32', samples: Buffer.alloc(4) }), set: { label: 'x' } },
  laps: { ...writers('laps.exclude'), row: of => ({ team_id: of.teamId, outing_id: of.outingId, number: 1, kind: 'timed', start_s: 0, time_s: 60 }), set: { excluded: true, excluded_reason: 'x' } },
  lap_sectors: { ...JOBS, row: async of => ({ team_id: of.teamId, lap_id: await firstId('laps', of), ordinal: 9, time_s: 1 }), set: { time_s: 1 } },
  // A membership ends and is never removed; people and teams come from registering.
  memberships: { ...writers('members.write'), remove: [], row: of => ({ team_id: of.teamId, user_id: stranger.me.id, role: 'coach' }), set: { role: 'owner' } },
  teams: { ...JOBS, change: who('members.write'), row: () => ({ name: 'x' }), set: { name: 'x' } },
  // The row is the owner's own, which only that person changes.
  users: { ...JOBS, change: ['owner'], row: () => ({ name: 'x', email: 'x@lapwright.example', password_hash: 'x' }), set: { name: 'x' } },
  // The owner's own as well. A hash can be written and never read, so nothing can be changed by it either.
  api_tokens: { ...JOBS, read: ['owner'], add: ['owner'], remove: ['owner'], row: of => ({ user_id: of.me.id, name: 'x', hash: randomBytes(32).toString('hex'), ending: 'wxyz' }), set: { name: 'x' } },
} satisfies Record<string, Rule>
type TableName = keyof typeof RULES
const TENANT_TABLES = Object.keys(RULES) as TableName[]

let application: Knex
let owner: Knex
let own: Garage
let other: Garage
let stranger: Registered

beforeAll(async () => {
  application = connect('application')
  owner = connect('owner')
  own = await garage()
  stranger = await register('Iggy Sample')
  await saveLines(own, fixtureLines('harrow-fell-lines.geojson'))
  await uploadAndRead(own, own.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
  await makeToken(own)
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

const VISIBLE = {
  users: ['id', 'name', 'email'], api_tokens: ['id', 'user_id', 'name', 'ending'],
} as Record<string, string[] | undefined>

/** Column and value by which the rows of a team are found in a table. */
function belonging(table: TableName, of: Garage): [string, string] {
  if (table === 'users') return ['id', of.me.id]
  if (table === 'api_tokens') return ['user_id', of.me.id]
  return [table === 'teams' ? 'id' : 'team_id', of.teamId]
}

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

  it('keeps nothing outside of public but the counters of attempts, which have no team', async () => {
    const { rows } = await owner.raw('select relname from pg_class where relnamespace = \'app\'::regnamespace and relkind in (\'r\', \'p\')')
    expect(rows).toEqual([{ relname: 'attempts' }])
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
          [row.team_id, row.id, row.user_id].some(value => value === own.teamId || value === own.me.id))
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
        const removed = await as(id, db => db(table).where(...belonging(table, own)).delete())
        expect(removed, `${name} removes from ${table}`).toBe(0)
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
      found[table] = Number((await owner(table).where(...belonging(table, own)).count('* as n'))[0]!.n)
    }
    return found
  }
})

describe('each role at the database, under row-level security alone', () => {
  const members = {} as Record<Role, string>

  beforeAll(async () => {
    other = await garage()
    await saveLines(other, fixtureLines('harrow-fell-lines.geojson'))
    await uploadAndRead(other, other.outingId, 'harrow-fell.csv', fixture('harrow-fell.csv'))
    await makeToken(other)
    members.owner = own.me.id
    for (const role of ['driver', 'crew', 'coach'] as const) {
      members[role] = (await register(`A ${role}`)).me.id
      await owner('memberships').insert({ team_id: own.teamId, user_id: members[role], role })
    }
  })

  /** Runs an attack and takes it back: whether it reached a row, met none, or was refused. */
  async function attack(role: Role, run: (db: Knex.Transaction) => Promise<number>): Promise<'done' | 'nothing' | 'refused'> {
    const back = new Error('taken back')
    let reached = 0
    try {
      await as(members[role], async (db) => {
        reached = await run(db)
        throw back
      })
    }
    catch (error) {
      const { code } = error as { code?: string }
      // What other rows stand on is not removed; but it was reached.
      if (code === '23503') return 'done'
      if (code === '42501') return 'refused'
      if (error !== back) throw error
    }
    return reached > 0 ? 'done' : 'nothing'
  }

  it.each(TENANT_TABLES)('%s', async (table) => {
    const { read = ROLES, add, change, remove, row, set }: Rule = RULES[table]
    for (const role of ROLES) {
      for (const of of [own, other]) {
        const mine = of === own
        const rows = () => (db: Knex.Transaction) => db(table).where(...belonging(table, of))
        const what = `${role}, ${mine ? 'own' : 'another'} team`
        const made = await row(of)
        const found = {
          read: await attack(role, async db => (await rows()(db).select(VISIBLE[table] ?? ['*'])).length),
          add: await attack(role, async (db) => {
            await db(table).insert(made)
            return 1
          }),
          change: await attack(role, db => rows()(db).update(set)),
          remove: await attack(role, db => rows()(db).delete()),
        }
        const can = (roles: readonly Role[]) => mine && roles.includes(role)
        expect(found.read, `${what} reads`).toBe(can(read) ? 'done' : 'nothing')
        expect(found.add, `${what} adds`).toBe(can(add) ? 'done' : 'refused')
        expect(found.change === 'done', `${what} changes: ${found.change}`).toBe(can(change))
        expect(found.remove === 'done', `${what} removes: ${found.remove}`).toBe(can(remove))
      }
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
