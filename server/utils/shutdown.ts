type Task = () => void

const held = globalThis as typeof globalThis & { lapwrightShutdown?: Set<Task> }

/** Open streams end at once when the process is told to stop, or it would wait for their browsers. */
export function onShutdown(task: Task): () => void {
  held.lapwrightShutdown ??= new Set()
  const tasks = held.lapwrightShutdown
  tasks.add(task)
  return () => tasks.delete(task)
}

export function runShutdown(): void {
  for (const task of held.lapwrightShutdown ?? []) task()
}
