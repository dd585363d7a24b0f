/**
 * Keeps what was worked out last: two who ask for the same at one moment wait for one answer, and the oldest answers
 * make room. A process that has forgotten works it out again, so nothing depends on what is kept.
 * @param most how many answers are kept
 * @returns asks for an answer by its key; a failure is not kept
 */
export function keepRecent<T>(most: number): (key: string, make: () => Promise<T>) => Promise<T> {
  const kept = new Map<string, Promise<T>>()
  return (key, make) => {
    const found = kept.get(key)
    const answer = found ?? make()
    // The order of a Map is that of setting: what was asked for last stands last.
    kept.delete(key)
    kept.set(key, answer)
    if (!found) answer.catch(() => kept.delete(key))
    for (const oldest of kept.keys()) {
      if (kept.size <= most) break
      kept.delete(oldest)
    }
    return answer
  }
}
