import { memberSchema } from '../../shared/schemas/people'
import type { Member } from '../../shared/schemas/people'
import { listOf, teamQuery } from '../../shared/schemas/common'
import { defineApiHandler } from '../utils/api'

export default defineApiHandler({
  about: 'The members of a team.',
  who: { action: 'read', of: 'team' },
  query: teamQuery,
  answer: listOf(memberSchema),
  handler: async ({ db, teamId }) => {
    const items = await db('memberships as m').join('users as u', 'u.id', 'm.user_id')
      .where('m.team_id', teamId).whereNull('m.left_at').orderBy('u.name')
      .select<Member[]>('u.id as userId', 'u.name', 'm.role')
    return { items }
  },
})
