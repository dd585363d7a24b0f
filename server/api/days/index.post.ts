import { teamQuery } from '../../../shared/schemas/common'
import { dayBody } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'

export default defineApiHandler({
  who: { action: 'days.write', of: 'team' },
  query: teamQuery,
  body: dayBody,
  status: 201,
  handler: async ({ db, teamId, body }) => {
    const [row] = await db('track_days')
      .insert({ team_id: teamId, circuit_id: body.circuitId, date: body.date, name: body.name, notes: body.notes })
      .returning<{ id: string }[]>('id')
    return { id: row!.id }
  },
})
