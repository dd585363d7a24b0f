import { idParams } from '../../../shared/schemas/common'
import { defineStreamHandler } from '../../utils/api'
import { removeLogFile } from '../../utils/log-files'
import { markRepeats } from '../../utils/repeats'
import { setResponseStatus } from 'h3'

export default defineStreamHandler({
  about: 'Removes a log with its file, channels and laps; a running job stops at its next step.',
  who: { action: 'logs.write', of: 'log' },
  params: idParams,
  answer: undefined,
  stream: async ({ event, params, teamId, transaction }) => {
    const gone = await transaction(async (db) => {
      const outings = await db('log_parts').where('log_id', params.id).select<{ outing_id: string }[]>('outing_id')
      const [row] = await db('logs').where('id', params.id).delete().returning<{ storage_key: string }[]>('storage_key')
      // Laps of other logs that stood behind its own count from now on.
      for (const { outing_id: id } of outings) await markRepeats(db, teamId, id)
      return row
    })
    // The file goes once the database has let go of it, or a failed removal would leave a log without its file.
    if (gone) await removeLogFile(gone.storage_key)
    setResponseStatus(event, 204)
    return null
  },
})
