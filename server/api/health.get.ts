import { healthSchema } from '../../shared/schemas/common'
import { defineApiHandler } from '../utils/api'
import { roles } from '../utils/roles'

export default defineApiHandler({
  about: 'Whether the process is up and reaches its database.',
  who: 'anyone',
  answer: healthSchema,
  handler: async ({ nobody }) => {
    await nobody(db => db.raw('select 1'))
    return { ok: true, roles: roles() }
  },
})
