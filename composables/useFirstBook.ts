import type { FirstBook } from '#shared/first-steps'
import type { Circuit } from '#shared/schemas/circuits'
import type { Day, DayListItem } from '#shared/schemas/days'
import type { Car } from '#shared/schemas/setups'

/** Under this name the book's beginnings are kept, so that whoever changes something can have them read again. */
export const FIRST_BOOK = 'first-book'

/**
 * What the team's book holds on the way to its first laps. Null when it could not be read: guidance is never worth an
 * error page.
 */
export async function useFirstBook() {
  const request = useRequestFetch()
  const session = useSessionStore()
  const { data, refresh } = await useAsyncData<FirstBook>(FIRST_BOOK, async () => {
    const query = { teamId: session.teamId }
    const [circuits, cars, days] = await Promise.all([
      request<{ items: Circuit[] }>('/api/circuits', { query }),
      request<{ items: Car[] }>('/api/cars', { query }),
      request<{ items: DayListItem[] }>('/api/days', { query }),
    ])
    const newest = days.items.find(day => day.outingCount > 0) ?? days.items[0]
    const day = newest ? await request<Day>(`/api/days/${newest.id}`) : null
    return {
      circuits: circuits.items,
      cars: cars.items,
      day: day && { id: day.id, date: day.date, outings: day.outings },
    }
  })
  return { book: data, refresh }
}

/** Whether this person is on the way to a first log of their own; kept in a cookie, so that every page knows it. */
export function useFirstWay() {
  const session = useSessionStore()
  const cookie = useCookie<string | null>('lapwright-first', { maxAge: 60 * 60 * 24 * 30, sameSite: 'lax', default: () => null })
  return computed({
    get: () => Boolean(session.me) && cookie.value === session.me?.id,
    set: (on: boolean) => {
      cookie.value = on ? session.me?.id ?? null : null
    },
  })
}
