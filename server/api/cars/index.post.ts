import { madeSchema, teamQuery } from '../../../shared/schemas/common'
import { carBody } from '../../../shared/schemas/setups'
import { defineApiHandler } from '../../utils/api'

export default defineApiHandler({
  about: 'A new car.',
  who: { action: 'cars.write', of: 'team' },
  query: teamQuery,
  body: carBody,
  status: 201,
  answer: madeSchema,
  handler: async ({ db, teamId, body }) => {
    const [row] = await db('cars').insert({ team_id: teamId, ...body }).returning<{ id: string }[]>('id')
    return { id: row!.id }
  },
})
