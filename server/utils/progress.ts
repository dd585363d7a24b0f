import { EventEmitter } from 'node:events'
import type { LogProgress } from '../../shared/schemas/days'
import { listenTo, type Listener } from './db/listen'
import { pool } from './db/pool'

const CHANNEL = 'lapwright_progress'

interface Following { events: EventEmitter, listener: Listener }
const held = globalThis as typeof globalThis & { lapwrightProgress?: Following }

/**
 * Tells every web process how far a log is. By a statement of its own: inside the transaction that writes the laps a
 * notification would arrive with its commit only.
 */
export async function tellProgress(progress: LogProgress): Promise<void> {
  await pool().raw('select pg_notify(?, ?)', [CHANNEL, JSON.stringify(progress)])
}

/** Calls back with each progress of one log until the returned function is called. */
export function followLog(logId: string, tell: (progress: LogProgress) => void): () => void {
  held.lapwrightProgress ??= follow()
  const { events } = held.lapwrightProgress
  events.on(logId, tell)
  return () => events.off(logId, tell)
}

export async function stopListening(): Promise<void> {
  const following = held.lapwrightProgress
  held.lapwrightProgress = undefined
  await following?.listener.stop()
}

/** One connection of this process feeds all its streams. */
function follow(): Following {
  const events = new EventEmitter().setMaxListeners(0)
  const listener = listenTo(CHANNEL, (payload) => {
    const progress = JSON.parse(payload) as LogProgress
    events.emit(progress.logId, progress)
  })
  return { events, listener }
}
