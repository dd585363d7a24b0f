import pg from 'pg'
import { databaseUrl } from './pool'

const RECONNECT_MS = 500

/** What a process has in hand, as locks of its session in the database: they vanish with it, however it ends. */
export interface Holding {
  /** Takes a lock of this name; the returned function lets it go. While the database is away the lock is not held. */
  hold: (name: string) => Promise<() => Promise<void>>
  stop: () => Promise<void>
}

/** The number by which a name is locked. */
const KEY = 'hashtextextended($1, 0)'

/** SQL that is true when some session holds the lock of the name that another piece of SQL gives. */
export function isHeld(name: string): string {
  return `exists (select 1 from pg_locks l where l.locktype = 'advisory' and l.objsubid = 1
    and l.database = (select oid from pg_database where datname = current_database())
    and ((l.classid::bigint << 32) | l.objid::bigint) = hashtextextended(${name}, 0))`
}

/** Holds locks on a connection of its own, and takes them again when the database was away. */
export function startHolding(): Holding {
  const names = new Set<string>()
  let client: pg.Client | undefined
  let stopped = false

  const connect = async (): Promise<void> => {
    const next = new pg.Client({ connectionString: databaseUrl(), application_name: 'lapwright holding' })
    const again = () => {
      if (client !== next && client !== undefined) return
      client = undefined
      if (!stopped) setTimeout(() => void connect(), RECONNECT_MS).unref()
    }
    next.once('end', again)
    next.on('error', () => void next.end().catch(() => undefined))
    try {
      await next.connect()
      for (const name of names) await next.query(`select pg_try_advisory_lock(${KEY})`, [name])
      client = next
    }
    catch {
      await next.end().catch(() => undefined)
    }
  }
  const connected = connect()
  const ask = async (sql: string, name: string) => {
    await client?.query(sql, [name]).catch(() => undefined)
  }

  return {
    hold: async (name) => {
      await connected
      names.add(name)
      await ask(`select pg_try_advisory_lock(${KEY})`, name)
      return async () => {
        names.delete(name)
        await ask(`select pg_advisory_unlock(${KEY})`, name)
      }
    },
    stop: async () => {
      stopped = true
      await client?.end().catch(() => undefined)
    },
  }
}
