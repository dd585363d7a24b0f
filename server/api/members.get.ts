import type { Member } from '../../shared/schemas/people'
import { teamQuery } from '../../shared/schemas/common'
import { defineApiHandler } from '../utils/api'

export default defineApiHandler({
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  handler: async ({ db, teamId }) => {
    const items = await db('memberships as m').join('users as u', 'u.id', 'm.user_id')
      .where('m.team_id', teamId).whereNull('m.left_at').orderBy('u.name')
      .select<Member[]>('u.id as userId', 'u.name', 'm.role')
    return { items }
  },
})
