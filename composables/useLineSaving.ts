import type { Problem } from '#shared/schemas/common'
import type { Layout } from '#shared/schemas/circuits'
import { ProblemError } from './useApi'
import type { useLineEditor } from './useLineEditor'

const LEAVE = 'The lines on this sheet have not been saved. Leave it?'

/** Storing the lines, telling when somebody else stored others meanwhile, and asking before unsaved ones are left. */
export function useLineSaving(layout: Ref<Layout>, editor: ReturnType<typeof useLineEditor>) {
  const api = useApi()
  const busy = ref(false)
  const problem = ref<Problem | null>(null)
  /** The layout as somebody else has saved it since this sheet was opened. */
  const theirs = shallowRef<Layout | null>(null)
  /** How many logs are cut again after the last saving; null before it. */
  const recutting = ref<number | null>(null)

  async function save(basedOnVersion = layout.value.linesVersion) {
    busy.value = true
    problem.value = null
    recutting.value = null
    try {
      const lines = editor.lines.value.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b }))
      const { recutting: logs, ...saved } = await api<Layout & { recutting: number }>(`/api/layouts/${layout.value.id}/lines`, { method: 'PUT', body: { basedOnVersion, lines } })
      const place = editor.lines.value.findIndex(line => line.key === editor.selected.value)
      layout.value = saved
      editor.takeStored(saved.lines)
      editor.selected.value = saved.lines[place]?.id ?? null
      theirs.value = null
      recutting.value = logs
    }
    catch (error) {
      if (!(error instanceof ProblemError)) throw error
      problem.value = error.problem
      if (error.problem.status === 409) theirs.value = await api<Layout>(`/api/layouts/${layout.value.id}`).catch(() => null)
    }
    finally {
      busy.value = false
    }
  }

  function takeTheirs() {
    if (!theirs.value) return
    layout.value = theirs.value
    editor.takeStored(theirs.value.lines)
    theirs.value = null
    problem.value = null
  }

  watch(editor.dirty, (dirty) => {
    if (dirty) recutting.value = null
  })
  guardLeaving(editor.dirty)
  return { busy, problem, theirs, recutting, save, takeTheirs, keepMine: () => save(theirs.value?.linesVersion) }
}

function guardLeaving(dirty: Ref<boolean>) {
  const onUnload = (event: BeforeUnloadEvent) => {
    if (dirty.value) event.preventDefault()
  }
  onMounted(() => window.addEventListener('beforeunload', onUnload))
  onBeforeUnmount(() => window.removeEventListener('beforeunload', onUnload))
  // A redirect on the way asks the guards again; the person is asked once.
  let letGo = false
  onBeforeRouteLeave(() => {
    letGo ||= !dirty.value || window.confirm(LEAVE)
    return letGo
  })
}
