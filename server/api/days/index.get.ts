import { dayListSchema } from '../../../shared/schemas/days'
import { z } from 'zod'
import { teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { listDays } from '../../utils/days'

export default defineApiHandler({
  about: 'The track days of a team, the newest first, in pages.',
  who: { action: 'read', of: 'team' },
  query: teamQuery.extend({ cursor: z.string().max(60).optional() }),
  answer: dayListSchema,
  handler: ({ db, teamId, query }) => listDays(db, teamId, query.cursor),
})
