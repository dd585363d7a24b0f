import { defineApiHandler } from '../utils/api'

export default defineApiHandler({
  who: 'anyone',
  handler: async ({ event }) => {
    await clearUserSession(event)
    return undefined
  },
})
