import type { z } from 'zod'
import { rangeInUnits } from '#shared/range-words'
import type { Problem } from '#shared/schemas/common'
import { ProblemError, problemOf } from './useApi'
import { useConflict, type StoredSheet } from './useConflict'

interface FormOptions<S extends z.ZodType, V extends object> {
  /** Judges what was typed, before anything is sent. */
  schema: S
  /** What the fields hold at first. */
  initial: V
  /**
   * Gets what the schema made of the values, and the version on which it is based. Throws a {@link ProblemError} to
   * keep the form and say what is wrong.
   */
  submit: (body: z.output<S>, basedOnVersion: number) => Promise<void>
  /** The sheet that is changed; none for a new one. */
  stored?: StoredSheet<V>
  /** Keeps what was typed over a reload, under this name. Never for passwords. */
  draftKey?: string
  /** Ask before leaving with something typed (default: yes). With a draft, moving within the site needs no question. */
  guard?: boolean
}

const LEAVE = 'What you typed on this sheet has not been saved. Leave it?'

/**
 * A form: values to bind, errors by dotted path, one problem for the whole, and what happens on submit.
 * On a mistake nothing typed is lost and the first bad field gets the focus.
 */
export function useForm<S extends z.ZodType, V extends object>(options: FormOptions<S, V>) {
  const told = useTold()
  const values = reactive(copy(options.initial)) as V
  const errors = reactive<Record<string, string>>({})
  const problem = ref<Problem | null>(null)
  const busy = ref(false)
  const saved = ref(snapshot(values))
  const dirty = computed(() => snapshot(values) !== saved.value)
  const conflict = useConflict(options.stored, options.initial, values)
  const { restored, discardDraft, startOver } = useDraft(options.draftKey, values, dirty, conflict)
  // Theirs was taken: that is what the form starts from now.
  watch(() => conflict.home, () => {
    startOver()
    rebase()
    problem.value = null
  })

  async function onSubmit(event?: Event) {
    if (busy.value) return
    const form = event?.target instanceof HTMLFormElement ? event.target : null
    event?.preventDefault()
    problem.value = null
    clear(errors)
    const judged = options.schema.safeParse(toRaw(values))
    if (!judged.success) {
      add(errors, judged.error.issues.map(({ path, message }) => ({ path: path.join('.'), message: told(message) })))
      problem.value = another(errors)
      return focusFirst(form, errors)
    }
    busy.value = true
    try {
      await options.submit(judged.data, conflict.basedOn)
      conflict.settle()
      rebase()
      discardDraft()
    }
    catch (error) {
      problem.value = inUnits(error instanceof ProblemError ? error.problem : unexpected(error), told)
      await conflict.notice(problem.value)
      add(errors, problem.value.errors ?? [])
    }
    finally {
      busy.value = false
    }
    // Fields are disabled by some pages while busy, and what is disabled cannot take the focus.
    if (problem.value) await focusFirst(form, errors)
  }

  /** Takes what the fields hold now for what they started with: nothing to lose, nothing to ask about. */
  function rebase() {
    saved.value = snapshot(values)
  }

  if (options.guard !== false) useLeaveGuard(dirty, busy, Boolean(options.draftKey))
  return { values, errors, problem, conflict, busy, dirty, restored, startOver, rebase, onSubmit }
}

function another(errors: Record<string, string>): Problem {
  return {
    type: 'about:blank', status: 422, title: 'Something on this sheet needs another look.', detail: '',
    errors: Object.entries(errors).map(([path, message]) => ({ path, message })),
  }
}

/** Tells a plausible range in the reader's units. */
function useTold() {
  const figures = useFigures()
  return (message: string) => rangeInUnits(message, figures)
}

function inUnits(problem: Problem, told: (message: string) => string): Problem {
  return { ...problem, errors: problem.errors?.map(({ path, message }) => ({ path, message: told(message) })) }
}

/** What a form starts with is plain data, perhaps handed on from reactive state that structuredClone refuses. */
function copy<V extends object>(initial: V): V {
  return JSON.parse(JSON.stringify(initial)) as V
}

function clear(errors: Record<string, string>) {
  for (const path of Object.keys(errors)) Reflect.deleteProperty(errors, path)
}

/** One message a field: the first. */
function add(errors: Record<string, string>, found: readonly { path: string, message: string }[]) {
  for (const { path, message } of found) errors[path] ??= message
}

/** As text, so that two states can be compared; an unreadable figure counts as something typed. */
function snapshot(values: object): string {
  return JSON.stringify(values, (_, value: unknown) => Number.isNaN(value) ? 'unreadable' : value)
}

function unexpected(error: unknown): Problem {
  console.error(error)
  return problemOf({ statusCode: 500, response: {}, data: (error as { data?: unknown }).data })
}

/** Moves to the first field, in the order of the page, that has an error. */
async function focusFirst(form: HTMLFormElement | null, errors: Record<string, string>) {
  await nextTick()
  const fields = [...form?.elements ?? []] as HTMLInputElement[]
  fields.find(field => field.name && field.name in errors)?.focus()
}

/**
 * Keeps what was typed in the tab's own store, and brings it back once the page is alive: with the version on which it
 * was based, since the sheet may have been changed by somebody else meanwhile.
 */
function useDraft<V extends object>(
  key: string | undefined, values: V, dirty: Ref<boolean>,
  conflict: { basedOn: number, mine: object | null, home: { values: V, version: number } },
) {
  const restored = ref(false)
  const name = `lapwright.draft.${key}`

  function discardDraft() {
    if (key && import.meta.client) sessionStorage.removeItem(name)
    restored.value = false
  }

  /** Throws the draft away and goes back to what the form was opened with. */
  function startOver() {
    Object.assign(values, copy(conflict.home.values))
    conflict.basedOn = conflict.home.version
    discardDraft()
  }

  if (key) {
    onMounted(() => {
      const kept = sessionStorage.getItem(name)
      restored.value = fill(values, kept)
      if (restored.value) conflict.basedOn = versionOf(kept) ?? conflict.basedOn
      watch(values, () => {
        // What the fields show then is not what was typed.
        if (conflict.mine) return
        if (dirty.value) sessionStorage.setItem(name, JSON.stringify({ ...values, basedOnVersion: conflict.basedOn }))
        else discardDraft()
      }, { deep: true })
    })
  }
  return { restored, discardDraft, startOver }
}

function versionOf(stored: string | null): number | null {
  const { basedOnVersion } = JSON.parse(stored ?? '{}') as { basedOnVersion?: unknown }
  return typeof basedOnVersion === 'number' ? basedOnVersion : null
}

/** Puts a stored draft into the values; parts that do not fit the form of today are left out. */
function fill(values: object, stored: string | null): boolean {
  if (!stored) return false
  try {
    return merge(values as Record<string, unknown>, JSON.parse(stored))
  }
  catch {
    return false
  }
}

function merge(target: Record<string, unknown>, source: unknown): boolean {
  if (typeof source !== 'object' || source === null) return false
  let changed = false
  for (const [key, value] of Object.entries(source)) {
    if (!(key in target)) continue
    const own = target[key]
    if (typeof own === 'object' && own !== null && !Array.isArray(own)) {
      changed = merge(own as Record<string, unknown>, value) || changed
    }
    else if (own === null || value === null || typeof own === typeof value) {
      changed ||= own !== value
      target[key] = value
    }
  }
  return changed
}

/** Asks before something typed is lost: on closing or reloading the tab, and on moving on unless a draft is kept. */
function useLeaveGuard(dirty: Ref<boolean>, busy: Ref<boolean>, kept: boolean) {
  if (import.meta.server) return
  const router = useRouter()
  const onUnload = (event: BeforeUnloadEvent) => {
    if (dirty.value && !kept) event.preventDefault()
  }
  let stop = () => {}
  onMounted(() => {
    window.addEventListener('beforeunload', onUnload)
    stop = router.beforeEach((to, from) => {
      // While busy it is the form itself that moves on.
      if (kept || busy.value || !dirty.value || to.path === from.path) return true
      return window.confirm(LEAVE)
    })
  })
  onBeforeUnmount(() => {
    window.removeEventListener('beforeunload', onUnload)
    stop()
  })
}
