import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readLog } from '../../utils/logs'

export default defineApiHandler({
  who: { action: 'read', of: 'log' },
  params: idParams,
  handler: ({ db, params }) => readLog(db, params.id),
})
