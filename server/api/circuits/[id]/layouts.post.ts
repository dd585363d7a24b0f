import { layoutBody } from '../../../../shared/schemas/circuits'
import { idParams, madeSchema } from '../../../../shared/schemas/common'
import { defineApiHandler } from '../../../utils/api'

export default defineApiHandler({
  about: 'A new layout: one way round the circuit.',
  who: { action: 'circuits.write', of: 'circuit' },
  params: idParams,
  body: layoutBody,
  status: 201,
  answer: madeSchema,
  handler: async ({ db, teamId, params, body }) => {
    const [row] = await db('layouts')
      .insert({ team_id: teamId, circuit_id: params.id, name: body.name, direction: body.direction })
      .returning<{ id: string }[]>('id')
    return { id: row!.id }
  },
})
