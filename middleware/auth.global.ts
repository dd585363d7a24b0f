/** Strangers see the front page, sign-in and registration; everything else asks who they are and comes back. */
export default defineNuxtRouteMiddleware((to) => {
  // An error page stands at the address that failed; leading away from it and back would never end.
  if (useError().value) return
  const session = useSessionStore()
  const open = ['/', '/sign-in', '/register'].includes(to.path)
  if (session.me) return open ? navigateTo(safeBack(to.query.back)) : undefined
  // An address that leads nowhere is told so, signed in or not.
  if (open || to.matched.length === 0) return
  return navigateTo({ path: '/sign-in', query: { back: to.fullPath } })
})
