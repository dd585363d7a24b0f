import { logProgressSchema } from '../../../../shared/schemas/days'
import { createEventStream } from 'h3'
import { idParams } from '../../../../shared/schemas/common'
import type { LogProgress } from '../../../../shared/schemas/days'
import { defineStreamHandler } from '../../../utils/api'
import { readProgress } from '../../../utils/logs'
import { isDatabaseAway } from '../../../utils/problems'
import { followLog } from '../../../utils/progress'
import { onShutdown } from '../../../utils/shutdown'

/** The state is told this often without being asked: proxies stay open, and a missed notification is mended. */
const BEAT_MS = 5000

export default defineStreamHandler({
  about: 'Progress of a log as server-sent events: how it stands now, then every step.',
  who: { action: 'read', of: 'log' },
  params: idParams,
  sendsEvents: true,
  answer: logProgressSchema,
  stream: async ({ event, params, transaction }) => {
    const stream = createEventStream(event)
    let told: LogProgress['status'] | undefined
    const push = (progress: LogProgress) => {
      told = progress.status
      void stream.push(JSON.stringify(progress)).catch(() => undefined)
    }
    // Followed before the state is read, so that nothing falls between the two.
    const unfollow = followLog(params.id, push)
    const pushBeat = () => void stream.push({ event: 'beat', data: '' }).catch(() => undefined)
    // The database knows the status, but not the step: a status that was told already would only take the step back.
    const tellChange = (progress: LogProgress) => progress.status === told ? pushBeat() : push(progress)
    // A database that is being started again ends no stream: it is asked again at the next beat.
    const fail = (error: Error) => isDatabaseAway(error) ? pushBeat() : void stream.close()
    const now = () => transaction(db => readProgress(db, params.id)).then(tellChange, fail)
    const beat = setInterval(now, BEAT_MS)
    const forget = onShutdown(() => void stream.close())
    stream.onClosed(async () => {
      clearInterval(beat)
      unfollow()
      forget()
    })
    void now()
    return stream.send()
  },
})
