import { daySchema } from '../../../shared/schemas/days'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readDay } from '../../utils/days'

export default defineApiHandler({
  about: 'One track day with its outings and their laps.',
  who: { action: 'read', of: 'day' },
  params: idParams,
  answer: daySchema,
  handler: ({ db, params }) => readDay(db, params.id),
})
