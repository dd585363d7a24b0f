import { asNobody } from './db/transactions'
import { sweepAttempts } from './limits'
import { removeLogFile } from './log-files'

const EVERY_MS = 3_600_000
/** No upload takes this long; what is older was left by a process that ended. */
const OLDER = '1 day'

/** Takes away half uploads, and counters whose time is over, now and every hour. */
export async function sweepUploads(): Promise<void> {
  await sweep()
  setInterval(() => void sweep().catch(error => console.error('sweeping uploads:', error)), EVERY_MS).unref()
}

async function sweep(): Promise<void> {
  await sweepAttempts()
  const { rows } = await asNobody(db =>
    db.raw<{ rows: { key: string }[] }>('select app.sweep_uploads(?::interval) as key', [OLDER]))
  for (const { key } of rows) await removeLogFile(key)
}
