import { readChannels } from './channels'
import { cutPart, readParts } from './cutting'
import { asTeam, type Transaction } from './db/transactions'
import type { Jobs } from './jobs'
import type { LogPath } from './laps/lap'
import { tellProgress } from './progress'
import { markRepeats } from './repeats'

/**
 * Lines have changed: every log driven on the layout is cut again from its stored channels. One that fails does not
 * keep the others from theirs; the job is then tried again.
 */
export async function cutLayoutJob({ teamId, layoutId }: Jobs['layout-cut']): Promise<void> {
  const parts = await asTeam(teamId, db => readParts(db, { layoutId, pending: true }))
  const errors: unknown[] = []
  for (const part of parts) {
    try {
      await cutAgain(teamId, part.id, part.log_id)
    }
    catch (error) {
      errors.push(error)
    }
  }
  if (errors.length) throw new AggregateError(errors, `${errors.length} of ${parts.length} logs could not be cut again`)
}

async function cutAgain(teamId: string, partId: string, logId: string): Promise<void> {
  const status = await asTeam(teamId, async (db) => {
    const log = await db('logs').where('id', logId).whereIn('status', ['no_lines', 'ready']).forUpdate()
      .first<{ gaps: LogPath['gaps'] } | undefined>('gaps')
    const part = (await readParts(db, { logId })).find(item => item.id === partId)
    if (!log || !part) return null
    const found = await cutPart(db, part, await readPath(db, teamId, logId, log.gaps))
    await db('logs').where('id', logId).update({ status: found })
    await markRepeats(db, teamId, part.outing_id)
    return found
  })
  if (status) await tellProgress({ logId, status, step: null, fraction: 1 })
}

/** Given up: the laps stay as they were, and nobody waits for others any more. */
export async function giveUpCut({ teamId, layoutId }: Jobs['layout-cut-failed']): Promise<void> {
  await asTeam(teamId, async (db) => {
    const ids = (await readParts(db, { layoutId, pending: true })).map(part => part.id)
    await db('log_parts').whereIn('id', ids).update({ cut_pending: false })
  })
}

/** The path of a log from its stored channels. */
export async function readPath(
  db: Transaction,
  teamId: string,
  logId: string,
  gaps: LogPath['gaps'],
): Promise<LogPath> {
  const channels = await readChannels(db, teamId, logId, ['time', 'latitude', 'longitude'])
  const samples = (name: string) => channels.get(name)!.samples as Float64Array
  return { timeS: samples('time'), latitudeDeg: samples('latitude'), longitudeDeg: samples('longitude'), gaps }
}
