import { teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCars } from '../../utils/cars'

export default defineApiHandler({
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  handler: async ({ db, teamId }) => ({ items: await readCars(db, teamId) }),
})
