import { z } from 'zod'
import { teamQuery } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { listDays } from '../../utils/days'

export default defineApiHandler({
  who: { action: 'read', of: 'team' },
  query: teamQuery.extend({ cursor: z.string().max(60).optional() }),
  handler: ({ db, teamId, query }) => listDays(db, teamId, query.cursor),
})
