import type { ColumnMap, LogPreview } from '../../shared/schemas/logs'
import type { Transaction } from './db/transactions'
import { sendJob } from './jobs'
import { headerKey } from './laps/sniff'
import type { Upload } from './log-upload'

/**
 * A log whose file lies in the storage becomes known: with the remembered map of its header, or the one given, it goes
 * straight to the worker; without one it waits for a person.
 */
export async function keepLog(
  db: Transaction,
  log: { id: string, teamId: string, outingId: string },
  upload: Upload,
  preview: LogPreview,
  columnMap?: ColumnMap,
): Promise<'queued' | 'mapping'> {
  const key = headerKey(preview)
  const remembered = await db('column_maps').where({ team_id: log.teamId, header_key: key })
    .first<{ column_map: ColumnMap } | undefined>('column_map')
  const map = remembered?.column_map ?? columnMap
  const status = map ? 'queued' : 'mapping'
  await db('logs').where('id', log.id).update({
    file_name: upload.fileName,
    sha256: upload.sha256,
    size_bytes: upload.sizeBytes,
    preview: JSON.stringify(preview),
    header_key: key,
    column_map: map ? JSON.stringify(map) : null,
    remembered: Boolean(remembered),
    status,
  })
  await db('log_parts').insert({ team_id: log.teamId, log_id: log.id, outing_id: log.outingId })
  if (map) await sendJob(db, 'log-read', { teamId: log.teamId, logId: log.id })
  return status
}
