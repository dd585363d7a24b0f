import { randomUUID } from 'node:crypto'
import { setResponseStatus } from 'h3'
import { idParams } from '../../../../shared/schemas/common'
import type { ColumnMap, LogPreview } from '../../../../shared/schemas/logs'
import { defineStreamHandler, type ShortTransaction } from '../../../utils/api'
import type { Transaction } from '../../../utils/db/transactions'
import { sendJob } from '../../../utils/jobs'
import { headerKey, sniffLog } from '../../../utils/laps/sniff'
import { readLogHead, removeLogFile } from '../../../utils/log-files'
import { receiveLog, type Upload } from '../../../utils/log-upload'
import { ProblemError } from '../../../utils/problems'

const HEAD_BYTES = 65_536

/** One log file for an outing: to storage, found out what it is, and on to the worker where its header is known. */
export default defineStreamHandler({
  who: { action: 'logs.write', of: 'outing' },
  params: idParams,
  stream: async ({ event, params, person, teamId, transaction }) => {
    const log = { id: randomUUID(), teamId, outingId: params.id }
    const storageKey = `${teamId}/${log.id}`
    await transaction(db => db('logs').insert({
      id: log.id,
      team_id: teamId,
      file_name: 'being uploaded',
      storage_key: storageKey,
      uploaded_by: person.id,
    }))
    try {
      const upload = await receiveLog(event, storageKey)
      const head = await readLogHead(storageKey, HEAD_BYTES)
      const preview = sniffLog(head, { complete: upload.sizeBytes <= head.length })
      await refuseTwin(transaction, teamId, upload.sha256)
      const status = await transaction(db => keep(db, log, upload, preview))
      setResponseStatus(event, 201)
      return { id: log.id, status }
    }
    catch (error) {
      await transaction(db => db('logs').where('id', log.id).delete())
      await removeLogFile(storageKey)
      // Two uploads of the same bytes at the same moment: the database lets one pass.
      if ((error as { constraint?: string }).constraint?.endsWith('logs_sha256')) {
        throw new ProblemError(409, 'Already here', 'The team has this very file already; it was sent at the same moment.')
      }
      throw error
    }
  },
})

async function refuseTwin(transaction: ShortTransaction, teamId: string, sha256: string): Promise<void> {
  const twin = await transaction(async db => db('logs').where({ team_id: teamId, sha256 })
    .whereNotIn('status', ['uploading', 'refused']).first<{ id: string, file_name: string } | undefined>('id', 'file_name'))
  if (twin) {
    throw new ProblemError(409, 'Already here', `The team has this very file already, as ${twin.file_name}. Nothing was stored twice.`, { see: `/logs/${twin.id}` })
  }
}

/** The log becomes known: with the remembered map of its header it goes straight to the worker. */
async function keep(
  db: Transaction,
  log: { id: string, teamId: string, outingId: string },
  upload: Upload,
  preview: LogPreview,
): Promise<'queued' | 'mapping'> {
  const key = headerKey(preview)
  const remembered = await db('column_maps').where({ team_id: log.teamId, header_key: key })
    .first<{ column_map: ColumnMap } | undefined>('column_map')
  const status = remembered ? 'queued' : 'mapping'
  await db('logs').where('id', log.id).update({
    file_name: upload.fileName,
    sha256: upload.sha256,
    size_bytes: upload.sizeBytes,
    preview: JSON.stringify(preview),
    header_key: key,
    column_map: remembered ? JSON.stringify(remembered.column_map) : null,
    remembered: Boolean(remembered),
    status,
  })
  await db('log_parts').insert({ team_id: log.teamId, log_id: log.id, outing_id: log.outingId })
  if (remembered) await sendJob(db, 'log-read', { teamId: log.teamId, logId: log.id })
  return status
}
