import { defineApiHandler } from '../utils/api'
import { endSession } from '../utils/sessions'

export default defineApiHandler({
  about: 'Ends the session of this browser.',
  who: 'anyone',
  answer: undefined,
  handler: async ({ event }) => {
    await endSession(event)
    return undefined
  },
})
