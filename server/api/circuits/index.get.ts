import { teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCircuits } from '../../utils/circuits'

export default defineApiHandler({
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  handler: async ({ db, teamId }) => ({ items: await readCircuits(db, teamId) }),
})
