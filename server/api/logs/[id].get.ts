import { logSchema } from '../../../shared/schemas/days'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readLog } from '../../utils/logs'

export default defineApiHandler({
  about: 'One log: how far it is, what its columns were taken for, what was found in it.',
  who: { action: 'read', of: 'log' },
  params: idParams,
  answer: logSchema,
  handler: ({ db, params }) => readLog(db, params.id),
})
