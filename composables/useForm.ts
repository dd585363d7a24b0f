import type { z } from 'zod'
import type { Problem } from '#shared/schemas/common'
import { ProblemError, problemOf } from './useApi'

interface FormOptions<S extends z.ZodType, V extends object> {
  /** Judges what was typed, before anything is sent. */
  schema: S
  /** What the fields hold at first. */
  initial: V
  /** Gets what the schema made of the values. Throws a {@link ProblemError} to keep the form and say what is wrong. */
  submit: (body: z.output<S>) => Promise<void>
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
  const values = reactive(copy(options.initial)) as V
  const errors = reactive<Record<string, string>>({})
  const problem = ref<Problem | null>(null)
  const busy = ref(false)
  const saved = ref(snapshot(values))
  const dirty = computed(() => snapshot(values) !== saved.value)
  const { restored, discardDraft, startOver } = useDraft(options.draftKey, values, dirty, options.initial)

  async function onSubmit(event?: Event) {
    if (busy.value) return
    const form = event?.target instanceof HTMLFormElement ? event.target : null
    event?.preventDefault()
    problem.value = null
    clear(errors)
    const judged = options.schema.safeParse(toRaw(values))
    if (!judged.success) {
      add(errors, judged.error.issues.map(issue => ({ path: issue.path.join('.'), message: issue.message })))
      problem.value = {
        type: 'about:blank', status: 422, title: 'Something on this sheet needs another look.', detail: '',
        errors: Object.entries(errors).map(([path, message]) => ({ path, message })),
      }
      await focusFirst(form, errors)
      return
    }
    busy.value = true
    try {
      await options.submit(judged.data)
      rebase()
      discardDraft()
    }
    catch (error) {
      problem.value = error instanceof ProblemError ? error.problem : unexpected(error)
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
  return { values, errors, problem, busy, dirty, restored, startOver, rebase, onSubmit }
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

/** Keeps what was typed in the tab's own store, and brings it back once the page is alive. */
function useDraft<V extends object>(key: string | undefined, values: V, dirty: Ref<boolean>, initial: V) {
  const restored = ref(false)
  const name = `lapwright.draft.${key}`

  function discardDraft() {
    if (key && import.meta.client) sessionStorage.removeItem(name)
    restored.value = false
  }

  /** Throws the draft away and goes back to what the form was opened with. */
  function startOver() {
    Object.assign(values, copy(initial))
    discardDraft()
  }

  if (key) {
    onMounted(() => {
      restored.value = fill(values, sessionStorage.getItem(name))
      watch(values, () => {
        if (dirty.value) sessionStorage.setItem(name, JSON.stringify(values))
        else discardDraft()
      }, { deep: true })
    })
  }
  return { restored, discardDraft, startOver }
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
