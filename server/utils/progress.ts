import { EventEmitter } from 'node:events'
import pg from 'pg'
import type { LogProgress } from '../../shared/schemas/days'
import { databaseUrl, pool } from './db/pool'

const CHANNEL = 'lapwright_progress'
const RECONNECT_MS = 1000

interface Listening { events: EventEmitter, stop: () => Promise<void> }
const held = globalThis as typeof globalThis & { lapwrightProgress?: Listening }

/**
 * Tells every web process how far a log is. By a statement of its own: inside the transaction that writes the laps a
 * notification would arrive with its commit only.
 */
export async function tellProgress(progress: LogProgress): Promise<void> {
  await pool().raw('select pg_notify(?, ?)', [CHANNEL, JSON.stringify(progress)])
}

/** Calls back with each progress of one log until the returned function is called. */
export function followLog(logId: string, tell: (progress: LogProgress) => void): () => void {
  held.lapwrightProgress ??= listen()
  const { events } = held.lapwrightProgress
  events.on(logId, tell)
  return () => events.off(logId, tell)
}

export async function stopListening(): Promise<void> {
  const listening = held.lapwrightProgress
  held.lapwrightProgress = undefined
  await listening?.stop()
}

/** One connection of this process listens for all its streams, and connects again when the database was away. */
function listen(): Listening {
  const events = new EventEmitter().setMaxListeners(0)
  let client: pg.Client | undefined
  let timer: NodeJS.Timeout | undefined
  let stopped = false

  const again = () => {
    if (stopped || timer) return
    timer = setTimeout(() => {
      timer = undefined
      void connect()
    }, RECONNECT_MS)
  }
  const connect = async () => {
    client = new pg.Client({ connectionString: databaseUrl(), application_name: 'lapwright progress' })
    client.on('error', again)
    client.on('end', again)
    client.on('notification', (message) => {
      const progress = JSON.parse(message.payload ?? '{}') as LogProgress
      events.emit(progress.logId, progress)
    })
    try {
      await client.connect()
      await client.query(`listen ${CHANNEL}`)
    }
    catch {
      again()
    }
  }
  void connect()

  return {
    events,
    stop: async () => {
      stopped = true
      clearTimeout(timer)
      await client?.end().catch(() => undefined)
    },
  }
}
