import { circuitBody } from '../../../shared/schemas/circuits'
import { madeSchema, teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'

export default defineApiHandler({
  about: 'A new circuit.',
  who: { action: 'circuits.write', of: 'team' },
  query: teamQuery,
  body: circuitBody,
  status: 201,
  answer: madeSchema,
  handler: async ({ db, teamId, body }) => {
    const [row] = await db('circuits')
      .insert({ team_id: teamId, name: body.name, time_zone: body.timeZone, notes: body.notes })
      .returning<{ id: string }[]>('id')
    return { id: row!.id }
  },
})
