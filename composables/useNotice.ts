/** One sentence about what has just been done, shown at the head of the sheet that comes next. */
export function useNotice() {
  return useState('notice', () => '')
}
