import { idParams } from '../../../shared/schemas/common'
import { excludeBody } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'
import { readLaps } from '../../utils/laps-of-outings'

/** Leaves a lap out with a reason, or puts it back. */
export default defineApiHandler({
  who: { action: 'laps.exclude', of: 'lap' },
  params: idParams,
  body: excludeBody,
  handler: async ({ db, teamId, params, body }) => {
    const [row] = await db('laps').where({ team_id: teamId, id: params.id })
      .update({ excluded: body.excluded, excluded_reason: body.excluded ? body.reason : '' })
      .returning<{ outing_id: string }[]>('outing_id')
    const laps = await readLaps(db, [row!.outing_id])
    return laps.get(row!.outing_id)!.find(lap => lap.id === params.id)!
  },
})
