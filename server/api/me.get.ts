import { meSchema } from '../../shared/schemas/people'
import { defineApiHandler } from '../utils/api'
import { readMe } from '../utils/people'

export default defineApiHandler({
  about: 'Who asks, with their teams and their role in each.',
  who: 'person',
  answer: meSchema,
  handler: ({ db, person }) => readMe(db, person.id),
})
