import { makeFigures, type Figures } from '#shared/figures'

/**
 * The writers of figures in the units and the language of the person who reads. They follow the person's choice: what
 * is written with them in a template or a computed value is written anew when it changes.
 */
export function useFigures(): Figures {
  const session = useSessionStore()
  const figures = computed(() => makeFigures(session.preferences))
  return new Proxy({} as Figures, { get: (_, name) => Reflect.get(figures.value, name) as unknown })
}
