/** Words for a problem: what happened, that nothing was lost, and the next step. */
export function useProblemText() {
  const { t, te } = useI18n()
  return function problemText(problem: ApiProblem): string {
    const key = te(`errors.${problem.code}`) ? problem.code : fallbackFor(problem.status)
    return t(`errors.${key}`, { wait: Math.max(1, Math.ceil((problem.retryAfter ?? 60) / 60)) })
  }
}

function fallbackFor(status: number): string {
  if (status === 0) return 'network'
  if (status === 404) return 'not-found'
  if (status === 403) return 'not-allowed'
  if (status === 413) return 'too-large'
  if (status === 429) return 'limited'
  return status === 503 ? 'unavailable' : 'internal'
}
