import { idParams } from '../../../shared/schemas/common'
import { outingBody } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'
import { requestCut } from '../../utils/cutting'
import { outingColumns, readOuting } from '../../utils/outings'

export default defineApiHandler({
  who: { action: 'outings.write', of: 'outing' },
  params: idParams,
  body: outingBody,
  handler: async ({ db, teamId, params, body }) => {
    const before = await db('outings').where('id', params.id).first<{ layout_id: string }>('layout_id')
    await db('outings').where('id', params.id).update(outingColumns(body))
    // On another layout other lines cut the log.
    if (before.layout_id !== body.layoutId) await requestCut(db, teamId, body.layoutId)
    return readOuting(db, params.id)
  },
})
