import { layoutBody } from '../../../shared/schemas/circuits'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readLayout } from '../../utils/circuits'
import { requestCut } from '../../utils/cutting'

export default defineApiHandler({
  who: { action: 'circuits.write', of: 'layout' },
  params: idParams,
  body: layoutBody,
  handler: async ({ db, teamId, params, body }) => {
    const before = await db('layouts').where('id', params.id).first<{ direction: string | null }>('direction')
    await db('layouts').where('id', params.id).update({ name: body.name, direction: body.direction })
    if (before.direction !== body.direction) await requestCut(db, teamId, params.id)
    return readLayout(db, params.id)
  },
})
