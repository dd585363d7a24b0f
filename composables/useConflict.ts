import type { Problem } from '#shared/schemas/common'
import { CHANGED_TYPE } from '#shared/schemas/common'

/** A sheet as it stands now, as a form would be filled from it. */
export interface Edition<V> { version: number, changedAt: string, values: V }

/** The sheet that a form changes. */
export interface StoredSheet<V> {
  /** Version that the form was filled from. */
  version: number
  /** Reads the sheet again, as it has become meanwhile. */
  read: () => Promise<Edition<V>>
}

export interface FormConflict<V> {
  /** What the form starts from: as it was opened, or theirs when that was taken. */
  home: { values: V, version: number }
  /** Version on which the next saving is based. */
  basedOn: number
  /** The sheet as it has become, once it is known that it was changed. */
  theirs: Edition<V> | null
  /** What was typed and its version, while the fields show theirs. */
  mine: { values: V, basedOn: number } | null
  /** Reads what the sheet has become, when that is the problem. */
  notice: (problem: Problem) => Promise<void>
  seeTheirs: () => void
  backToMine: () => void
  takeTheirs: () => void
  /** The next saving replaces theirs, knowingly. */
  replaceTheirs: () => void
  /** The matter is settled: saved, or taken over. */
  settle: () => void
}

/**
 * Two people, or two tabs, at one sheet: the second to save is told, and keeps what was typed. The fields can show what
 * the sheet has become and come back; then one of the two is taken, by a choice and never by chance.
 * @param initial what the form was filled with
 * @param values of the form
 */
export function useConflict<V extends object>(
  stored: StoredSheet<V> | undefined, initial: V, values: V,
): FormConflict<V> {
  const home = shallowRef({ values: initial, version: stored?.version ?? 0 })
  const basedOn = ref(home.value.version)
  const theirs = shallowRef<Edition<V> | null>(null)
  const mine = shallowRef<{ values: V, basedOn: number } | null>(null)

  async function notice(problem: Problem) {
    if (problem.type !== CHANGED_TYPE || !stored) return
    mine.value = null
    theirs.value = await stored.read().catch(() => null)
  }

  function seeTheirs() {
    if (!theirs.value || mine.value) return
    mine.value = { values: plain(values), basedOn: basedOn.value }
    basedOn.value = theirs.value.version
    Object.assign(values, plain(theirs.value.values))
  }

  function backToMine() {
    if (!mine.value) return
    Object.assign(values, mine.value.values)
    basedOn.value = mine.value.basedOn
    mine.value = null
  }

  function takeTheirs() {
    if (!theirs.value) return
    home.value = { values: theirs.value.values, version: theirs.value.version }
    settle()
  }

  function replaceTheirs() {
    if (theirs.value) basedOn.value = theirs.value.version
  }

  function settle() {
    mine.value = null
    theirs.value = null
  }

  const state = { home, basedOn, theirs, mine, notice, seeTheirs, backToMine, takeTheirs, replaceTheirs, settle }
  return reactive(state) as unknown as FormConflict<V>
}

/** What fields hold is plain data, which structuredClone refuses within reactive state. */
function plain<V>(values: V): V {
  return JSON.parse(JSON.stringify(values)) as V
}

/**
 * The sheet of a page as its form needs it. Reading it again brings the page up to date as well.
 * @param toValues what a form is filled with
 */
export function useStoredSheet<T extends { version: number, changedAt: string }, V>(
  url: () => string, sheet: Ref<T>, toValues: (sheet: T) => V,
) {
  const api = useApi()
  return computed<StoredSheet<V>>(() => ({
    version: sheet.value.version,
    read: async () => {
      const now = await api<T>(url())
      sheet.value = now
      return { version: now.version, changedAt: now.changedAt, values: toValues(now) }
    },
  }))
}
