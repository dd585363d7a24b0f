import { defineEventHandler, setResponseStatus } from 'h3'
import { roles } from '../utils/roles'

/** A worker has a port for its health alone. */
export default defineEventHandler((event) => {
  if (roles().includes('web') || event.path === '/api/health') return
  setResponseStatus(event, 404)
  return 'This is a worker of Lapwright; it answers /api/health alone.\n'
})
