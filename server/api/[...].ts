import { defineApiHandler } from '../utils/api'
import { notFound } from '../utils/problems'

export default defineApiHandler({
  about: 'What is under /api and nowhere else: answered with a problem.',
  who: 'anyone',
  answer: undefined,
  handler: async () => {
    throw notFound('route')
  },
})
