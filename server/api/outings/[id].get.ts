import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readOuting } from '../../utils/outings'

export default defineApiHandler({
  who: { action: 'read', of: 'outing' },
  params: idParams,
  handler: ({ db, params }) => readOuting(db, params.id),
})
