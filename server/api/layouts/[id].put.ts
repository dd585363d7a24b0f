import { layoutChange, layoutSchema } from '../../../shared/schemas/circuits'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readLayout } from '../../utils/circuits'
import { requestCut } from '../../utils/cutting'
import { replaceSheet } from '../../utils/versions'

export default defineApiHandler({
  about: 'Replaces name and direction of a layout; a new direction has its logs cut again.',
  who: { action: 'circuits.write', of: 'layout' },
  params: idParams,
  body: layoutChange,
  answer: layoutSchema,
  handler: async ({ db, teamId, params, body }) => {
    const before = await db('layouts').where('id', params.id).first<{ direction: string | null }>('direction')
    await replaceSheet(db, 'layouts', params.id, body.basedOnVersion, { name: body.name, direction: body.direction })
    if (before.direction !== body.direction) await requestCut(db, teamId, params.id)
    return readLayout(db, params.id)
  },
})
