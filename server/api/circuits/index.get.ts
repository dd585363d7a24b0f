import { circuitSchema } from '../../../shared/schemas/circuits'
import { listOf, teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCircuits } from '../../utils/circuits'

export default defineApiHandler({
  about: 'The circuits of a team with their layouts.',
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  answer: listOf(circuitSchema),
  handler: async ({ db, teamId }) => ({ items: await readCircuits(db, teamId) }),
})
