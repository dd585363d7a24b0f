import { idParams } from '../../../shared/schemas/common'
import { excludeBody, lapSchema } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'
import { readLaps } from '../../utils/laps-of-outings'

/**
 * Leaves a lap out with a reason, or puts it back. Without a version: it says one thing and takes nothing else with it,
 * so the last word counts and nobody's other words are lost.
 */
export default defineApiHandler({
  about: 'Leaves a lap out with a reason, or puts it back.',
  who: { action: 'laps.exclude', of: 'lap' },
  params: idParams,
  body: excludeBody,
  answer: lapSchema,
  handler: async ({ db, teamId, params, body }) => {
    const [row] = await db('laps').where({ team_id: teamId, id: params.id })
      .update({ excluded: body.excluded, excluded_reason: body.excluded ? body.reason : '' })
      .returning<{ outing_id: string }[]>('outing_id')
    const laps = await readLaps(db, [row!.outing_id])
    return laps.get(row!.outing_id)!.find(lap => lap.id === params.id)!
  },
})
