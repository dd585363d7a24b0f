import { defineApiHandler } from '../utils/api'
import { readMe } from '../utils/people'

export default defineApiHandler({
  who: 'person',
  handler: ({ db, person }) => readMe(db, person.id),
})
