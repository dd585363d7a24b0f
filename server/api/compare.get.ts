import { compareQuery } from '../../shared/schemas/compare'
import { defineApiHandler } from '../utils/api'
import { readComparison } from '../utils/comparison'

/** Row-level security shows the laps of the person's teams alone; a lap of another team is not found. */
export default defineApiHandler({
  who: 'person',
  query: compareQuery,
  handler: ({ db, query }) => readComparison(db, query.lap, query.against),
})
