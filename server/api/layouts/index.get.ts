import { layoutChoiceSchema, type LayoutChoice } from '../../../shared/schemas/circuits'
import { listOf, teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'

export default defineApiHandler({
  about: 'The layouts of a team, with how many timed laps each has.',
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  answer: listOf(layoutChoiceSchema),
  handler: async ({ db, teamId }) => {
    const items = await db('layouts as y').join('circuits as c', 'c.id', 'y.circuit_id').where('y.team_id', teamId)
      .orderBy(['c.name', 'y.name'])
      .select<LayoutChoice[]>(
        'y.id', 'y.name', 'c.id as circuitId', 'c.name as circuitName',
        db.raw(`(select count(*)::int from outings o join laps l on l.team_id = o.team_id and l.outing_id = o.id
          where o.team_id = y.team_id and o.layout_id = y.id and l.kind = 'timed') as "timedLapCount"`))
    return { items }
  },
})
