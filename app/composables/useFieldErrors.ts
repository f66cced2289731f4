import type { z } from 'zod'

type Issue = z.core.$ZodIssue

/** Words for what a schema or the server found wrong with single fields. Keys are paths, `vitals.0.systolic`. */
export function useFieldErrors() {
  const { t, te } = useI18n()

  function word(code: string, limit?: number | bigint): string {
    return t(`errors.field.${code}`, { limit: String(limit ?? '') })
  }

  function textOf(issue: Issue): string {
    const named = te(`errors.field.${issue.message}`)
    if (issue.code === 'custom' || named) return named ? word(issue.message) : word('invalid')
    const make = WORDS[issue.code]
    return make ? make(issue, word) : word('invalid')
  }

  /** The first issue of each path speaks. */
  function fromSchema(issues: readonly Issue[]): Record<string, string> {
    return Object.fromEntries([...issues].reverse().map(issue => [issue.path.join('.'), textOf(issue)]))
  }

  function fromServer(issues: readonly ApiIssue[]): Record<string, string> {
    return Object.fromEntries([...issues].reverse().map(({ path, message }) => [path, te(`errors.field.${message}`) ? word(message) : word('invalid')]))
  }

  return { fromSchema, fromServer }
}

const FORMAT_WORDS: Partial<Record<string, string>> = { date: 'date', datetime: 'time' }

type Word = (code: string, limit?: number | bigint) => string

const WORDS: Partial<Record<string, (issue: Issue, word: Word) => string>> = {
  invalid_type: (issue, word) => word(issue.code === 'invalid_type' && ['number', 'int'].includes(issue.expected) ? 'number' : 'required'),
  invalid_format: (issue, word) => word((issue.code === 'invalid_format' && FORMAT_WORDS[issue.format]) || 'invalid'),
  invalid_value: (_issue, word) => word('choose'),
  too_small: (issue, word) => {
    if (issue.code !== 'too_small') return word('invalid')
    if (issue.origin !== 'string') return word('at-least', issue.minimum)
    return issue.minimum === 1 ? word('required') : word('too-short', issue.minimum)
  },
  too_big: (issue, word) => issue.code === 'too_big' ? word(issue.origin === 'string' ? 'too-long' : 'at-most', issue.maximum) : word('invalid'),
}
