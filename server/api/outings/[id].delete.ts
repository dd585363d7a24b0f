import { setResponseStatus } from 'h3'
import { idParams } from '../../../shared/schemas/common'
import { removeOutingQuery } from '../../../shared/schemas/days'
import { defineStreamHandler } from '../../utils/api'
import { removeLogFile } from '../../utils/log-files'
import { removeOuting } from '../../utils/removal'

export default defineStreamHandler({
  about: 'Removes an outing, with those of its logs that are named.',
  who: { action: 'outings.write', of: 'outing' },
  params: idParams,
  query: removeOutingQuery,
  answer: undefined,
  stream: async ({ event, params, query, transaction }) => {
    const keys = await transaction(db => removeOuting(db, params.id, query.withLog))
    // The files go once the database has let go of them, or a failed removal would leave logs without their files.
    for (const key of keys) await removeLogFile(key)
    setResponseStatus(event, 204)
    return null
  },
})
