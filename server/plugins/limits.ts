import process from 'node:process'
import { uploadsPerHour } from '../utils/limits'

/** A limit that cannot be read is said at the start, and not at somebody's upload. */
export default defineNitroPlugin(() => {
  try {
    uploadsPerHour()
  }
  catch (error) {
    console.error((error as Error).message)
    process.exit(1)
  }
})
