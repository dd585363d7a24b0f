import { compareQuery, comparisonSchema } from '../../shared/schemas/compare'
import { defineApiHandler } from '../utils/api'
import { readComparison } from '../utils/comparison'

/** Row-level security shows the laps of the person's teams alone; a lap of another team is not found. */
export default defineApiHandler({
  about: 'Two timed laps of a layout held against each other by station.',
  who: 'person',
  query: compareQuery,
  answer: comparisonSchema,
  handler: ({ db, query }) => readComparison(db, query.lap, query.against),
})
