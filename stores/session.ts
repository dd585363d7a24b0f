import type { Action } from '#shared/access'
import { may } from '#shared/access'
import { FIRST_PREFERENCES, type Me } from '#shared/schemas/people'

/** Who is signed in, and in which team with which role. */
export const useSessionStore = defineStore('session', () => {
  /** The person, or null for a stranger. */
  const me = ref<Me | null>(null)
  /** The team whose sheets are open: the first one of the person. */
  const team = computed(() => me.value?.teams[0] ?? null)
  const teamId = computed(() => team.value?.id ?? '')
  const role = computed(() => team.value?.role ?? null)
  /** How the person reads; a stranger as everybody does at first. */
  const preferences = computed(() => me.value?.preferences ?? FIRST_PREFERENCES)

  /** Whether to offer something: the server judges again by the same table. */
  function can(action: Action): boolean {
    return role.value !== null && may(role.value, action)
  }

  return { me, team, teamId, role, preferences, can }
})
