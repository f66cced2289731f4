/** @returns the entries of `now` that differ from `before`, by content. */
export function changedEntries(before: Record<string, unknown>, now: Record<string, unknown>): Record<string, unknown> {
  return Object.fromEntries(Object.entries(now).filter(([name, value]) => JSON.stringify(value) !== JSON.stringify(before[name])))
}
