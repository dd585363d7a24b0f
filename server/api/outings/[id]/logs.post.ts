import { arrivedSchema } from '../../../../shared/schemas/logs'
import { randomUUID } from 'node:crypto'
import { setResponseStatus } from 'h3'
import { idParams } from '../../../../shared/schemas/common'
import { defineStreamHandler, type ShortTransaction } from '../../../utils/api'
import { sniffLog } from '../../../utils/laps/sniff'
import { countUpload } from '../../../utils/limits'
import { keepLog } from '../../../utils/log-arrival'
import { readLogHead, removeLogFile } from '../../../utils/log-files'
import { receiveLog, refuseUpload } from '../../../utils/log-upload'
import { ProblemError } from '../../../utils/problems'

const HEAD_BYTES = 65_536

export default defineStreamHandler({
  about: 'One log file for an outing, plain or gzip; it goes to the worker when its header is known.',
  who: { action: 'logs.write', of: 'outing' },
  params: idParams,
  takesFile: true,
  status: 201,
  answer: arrivedSchema,
  stream: async ({ event, params, person, teamId, transaction }) => {
    await countUpload(event, teamId).catch(error => refuseUpload(event, error))
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
      const status = await transaction(db => keepLog(db, log, upload, preview))
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
