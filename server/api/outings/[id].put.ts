import { idParams } from '../../../shared/schemas/common'
import { outingChange, outingSchema } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'
import { requestCut } from '../../utils/cutting'
import { outingColumns, readOuting } from '../../utils/outings'
import { replaceSheet } from '../../utils/versions'

export default defineApiHandler({
  about: 'Replaces what is said of an outing; on another layout its log is cut again.',
  who: { action: 'outings.write', of: 'outing' },
  params: idParams,
  body: outingChange,
  answer: outingSchema,
  handler: async ({ db, teamId, params, body }) => {
    const before = await db('outings').where('id', params.id).first<{ layout_id: string }>('layout_id')
    await replaceSheet(db, 'outings', params.id, body.basedOnVersion, outingColumns(body))
    // On another layout other lines cut the log.
    if (before.layout_id !== body.layoutId) await requestCut(db, teamId, body.layoutId)
    return readOuting(db, params.id)
  },
})
