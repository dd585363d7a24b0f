import { defineApiHandler } from '../utils/api'
import { roles } from '../utils/roles'

/** Whether the process is up and reaches its database. */
export default defineApiHandler({
  who: 'anyone',
  handler: async ({ db }) => {
    await db.raw('select 1')
    return { ok: true, roles: roles() }
  },
})
