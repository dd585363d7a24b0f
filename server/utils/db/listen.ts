import pg from 'pg'
import { databaseUrl } from './pool'

const RECONNECT_MS = 1000

export interface Listener { stop: () => Promise<void> }

/** Listens to a channel of NOTIFY on a connection of its own, and connects again when the database was away. */
export function listenTo(channel: string, tell: (payload: string) => void): Listener {
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
    client.on('notification', message => tell(message.payload ?? ''))
    try {
      await client.connect()
      await client.query(`listen ${channel}`)
    }
    catch {
      again()
    }
  }
  void connect()

  return {
    stop: async () => {
      stopped = true
      clearTimeout(timer)
      await client?.end().catch(() => undefined)
    },
  }
}
