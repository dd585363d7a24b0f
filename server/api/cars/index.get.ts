import { carSchema } from '../../../shared/schemas/setups'
import { listOf, teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCars } from '../../utils/cars'

export default defineApiHandler({
  about: 'The cars of a team with their setup revisions.',
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  answer: listOf(carSchema),
  handler: async ({ db, teamId }) => ({ items: await readCars(db, teamId) }),
})
