import { createPinia, setActivePinia } from 'pinia'
import { beforeEach, describe, expect, it } from 'vitest'
import { ACTIONS } from '../../shared/access'
import type { Role } from '../../shared/schemas/common'
import { useSessionStore } from '../../stores/session'
import { FIRST_PREFERENCES } from '../../shared/schemas/people'

const me = (role: Role) => ({
  id: '0199a000-0000-7000-8000-000000000001',
  name: 'Nell Marsh',
  email: 'nell@lapwright.example',
  preferences: FIRST_PREFERENCES,
  teams: [{ id: '0199a000-0000-7000-8000-000000000002', name: 'Fell Garage', role }],
})

describe('session store', () => {
  beforeEach(() => setActivePinia(createPinia()))

  it('knows nobody and allows nothing at first', () => {
    const session = useSessionStore()
    expect([session.me, session.team, session.teamId, session.role]).toEqual([null, null, '', null])
    expect(ACTIONS.filter(action => session.can(action))).toEqual([])
  })

  it('opens the person’s team and allows what the role may', () => {
    const session = useSessionStore()
    session.me = me('crew')
    expect([session.team?.name, session.role]).toEqual(['Fell Garage', 'crew'])
    expect(session.can('setups.write')).toBe(true)
    expect(session.can('lines.write')).toBe(false)
  })

  it('follows a change of role', () => {
    const session = useSessionStore()
    session.me = me('owner')
    expect(session.can('lines.write')).toBe(true)
    session.me = me('coach')
    expect(ACTIONS.filter(action => session.can(action))).toEqual(['read'])
  })

  it('forgets everything at sign-out', () => {
    const session = useSessionStore()
    session.me = me('owner')
    session.me = null
    expect([session.teamId, session.can('read')]).toEqual(['', false])
  })
})
