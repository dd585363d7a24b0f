import { defineApiHandler } from '../utils/api'
import { notFound } from '../utils/problems'

/** What is under /api and nowhere else: a problem like any other, and not a page. */
export default defineApiHandler({
  who: 'anyone',
  handler: async () => {
    throw notFound('route')
  },
})
