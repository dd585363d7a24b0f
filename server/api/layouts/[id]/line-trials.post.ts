import { lineTrialBody, lineTrialSchema, type LineTrial } from '../../../../shared/schemas/circuits'
import { idParams } from '../../../../shared/schemas/common'
import { defineApiHandler } from '../../../utils/api'
import { cutLaps } from '../../../utils/laps/lap'
import type { DrivingDirection } from '../../../utils/laps/types'
import { readPath } from '../../../utils/cut-work'
import { notFound } from '../../../utils/problems'

export default defineApiHandler({
  about: 'What lines would do to a log, worked out without storing anything.',
  who: { action: 'read', of: 'layout' },
  params: idParams,
  body: lineTrialBody,
  answer: lineTrialSchema,
  handler: async ({ db, teamId, params, body }): Promise<LineTrial> => {
    const layout = await db('layouts').where('id', params.id).first<{ direction: DrivingDirection | null }>('direction')
    const log = await db('logs').where({ team_id: teamId, id: body.logId }).whereIn('status', ['no_lines', 'ready'])
      .first<{ gaps: { fromS: number, toS: number }[] } | undefined>('gaps')
    if (!log) throw notFound('log')
    const path = await readPath(db, teamId, body.logId, log.gaps)
    const lines = body.lines.map(line => ({ ...line, id: String(line.ordinal) })).sort((a, b) => a.ordinal - b.ordinal)
    const cut = cutLaps(path, lines, { direction: layout.direction })
    const times = cut.laps.filter(lap => lap.kind === 'timed').map(lap => lap.timeS)
    return {
      timedLaps: times.length,
      bestS: times.length ? Math.min(...times) : null,
      lines: cut.lines.map(({ id, ...count }) => ({ ordinal: Number(id), ...count })),
      warnings: cut.warnings.map(({ code, message }) => ({ code, message })),
    }
  },
})
