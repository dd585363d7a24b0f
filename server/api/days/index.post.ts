import { madeSchema, teamQuery } from '../../../shared/schemas/common'
import { dayBody } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'

export default defineApiHandler({
  about: 'A new track day.',
  who: { action: 'days.write', of: 'team' },
  query: teamQuery,
  body: dayBody,
  status: 201,
  answer: madeSchema,
  handler: async ({ db, teamId, body }) => {
    const [row] = await db('track_days')
      .insert({ team_id: teamId, circuit_id: body.circuitId, date: body.date, name: body.name, notes: body.notes })
      .returning<{ id: string }[]>('id')
    return { id: row!.id }
  },
})
