import { defineApiHandler } from '../utils/api'
import { endSession } from '../utils/sessions'

export default defineApiHandler({
  who: 'anyone',
  handler: async ({ event }) => {
    await endSession(event)
    return undefined
  },
})
