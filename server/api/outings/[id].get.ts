import { outingSchema } from '../../../shared/schemas/days'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readOuting } from '../../utils/outings'

export default defineApiHandler({
  about: 'One outing with its laps and logs.',
  who: { action: 'read', of: 'outing' },
  params: idParams,
  answer: outingSchema,
  handler: ({ db, params }) => readOuting(db, params.id),
})
