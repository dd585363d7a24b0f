import { defineApiHandler } from '../utils/api'
import { roles } from '../utils/roles'

/** Whether the process is up and reaches its database. */
export default defineApiHandler({
  who: 'anyone',
  handler: async ({ nobody }) => {
    await nobody(db => db.raw('select 1'))
    return { ok: true, roles: roles() }
  },
})
