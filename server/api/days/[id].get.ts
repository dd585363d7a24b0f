import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readDay } from '../../utils/days'

export default defineApiHandler({
  who: { action: 'read', of: 'day' },
  params: idParams,
  handler: ({ db, params }) => readDay(db, params.id),
})
