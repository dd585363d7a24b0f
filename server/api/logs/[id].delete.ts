import { idParams } from '../../../shared/schemas/common'
import { defineStreamHandler } from '../../utils/api'
import { removeLogFile } from '../../utils/log-files'
import { setResponseStatus } from 'h3'

/** Takes a log away: a running job stops at its next step, and file, channels and laps go. */
export default defineStreamHandler({
  who: { action: 'logs.write', of: 'log' },
  params: idParams,
  stream: async ({ event, params, transaction }) => {
    const [gone] = await transaction(db => db('logs').where('id', params.id).delete().returning<{ storage_key: string }[]>('storage_key'))
    // The file goes once the database has let go of it, or a failed removal would leave a log without its file.
    if (gone) await removeLogFile(gone.storage_key)
    setResponseStatus(event, 204)
    return null
  },
})
