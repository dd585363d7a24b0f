import { closePool } from '../utils/db/pool'
import { stopJobQueue } from '../utils/jobs'
import { stopListening } from '../utils/progress'
import { stopWorking } from '../utils/work'

/** What the process holds open in the database is let go when it ends. */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('close', async () => {
    await stopWorking()
    await stopJobQueue()
    await stopListening()
    await closePool()
  })
})
