import { layoutLogSchema } from '../../../../shared/schemas/circuits'
import type { LayoutLog } from '../../../../shared/schemas/circuits'
import { idParams, listOf } from '../../../../shared/schemas/common'
import { defineApiHandler } from '../../../utils/api'

export default defineApiHandler({
  about: 'Logs that were driven on the layout and have been read, the newest first.',
  who: { action: 'read', of: 'layout' },
  params: idParams,
  answer: listOf(layoutLogSchema),
  handler: async ({ db, params }) => {
    const items = await db('logs as g').join('log_parts as p', 'p.log_id', 'g.id').join('outings as o', 'o.id', 'p.outing_id')
      .join('track_days as d', 'd.id', 'o.day_id')
      .where('o.layout_id', params.id).whereIn('g.status', ['no_lines', 'ready'])
      // A log of less than a lap is a poor paper to draw on.
      .orderByRaw('g.duration_s >= 60 desc, d.date desc, o.number desc').limit(100)
      .select<LayoutLog[]>('g.id', 'g.file_name as fileName', 'g.status', 'o.id as outingId', 'o.number as outingNumber', 'd.date')
    return { items }
  },
})
