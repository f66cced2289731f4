import type { z } from 'zod'

interface FormOptions<Input, Answer> {
  /** The schema that the server checks with. */
  schema: z.ZodType<Input>
  /** What the fields hold, in the schema's shape. */
  toInput: () => Record<string, unknown>
  /** Sends it. The key stays the same while the same content is sent again, so that a lost answer makes nothing twice. */
  send: (input: Input, idempotencyKey: string) => Promise<Answer>
  /** Refusals that belong to one field: code of the server to path. */
  codeFields?: Record<string, string>
}

/** Checks a form at its fields, sends it once, and puts what the server says back at the fields. */
export function useForm<Input, Answer>({ schema, toInput, send, codeFields = {} }: FormOptions<Input, Answer>) {
  const { fromSchema, fromServer } = useFieldErrors()
  const problemText = useProblemText()
  const { t } = useI18n()
  const { announce } = useAnnounce()
  const errors = ref<Record<string, string>>({})
  const problem = ref<ApiProblem | null>(null)
  const isBusy = ref(false)
  const keyFor = useIdempotencyKey()

  function refuse(found: Record<string, string>, form: HTMLElement | null | undefined) {
    errors.value = found
    announce(t('common.checkFields', Object.keys(found).length))
    void focusFirstError(form)
  }

  function take(error: unknown, form: HTMLElement | null | undefined) {
    const found = parseApiError(error)
    const path = codeFields[found.code]
    const atFields = path ? { [path]: problemText(found) } : fromServer(found.issues)
    if (Object.keys(atFields).length > 0) refuse(atFields, form)
    problem.value = path ? null : found
  }

  /** @returns the server's answer, or undefined when something needs a look first. */
  async function submit(form?: HTMLElement | null): Promise<Answer | undefined> {
    if (isBusy.value) return undefined
    errors.value = {}
    problem.value = null
    const checked = schema.safeParse(toInput())
    if (!checked.success) {
      refuse(fromSchema(checked.error.issues), form)
      return undefined
    }
    isBusy.value = true
    try {
      return await send(checked.data, keyFor(JSON.stringify(checked.data)))
    } catch (error) {
      take(error, form)
      return undefined
    } finally {
      isBusy.value = false
    }
  }

  /** What to say above the form; what is said at a field is not said twice. */
  const notice = computed(() => {
    if (problem.value) return problemText(problem.value)
    const count = Object.keys(errors.value).length
    return count > 0 ? t('common.checkFields', count) : ''
  })

  return { errors, problem, notice, isBusy, submit }
}

/** The same content keeps its key, so that sending it again after a lost answer makes nothing twice. */
function useIdempotencyKey() {
  let last = { content: '', key: '' }
  return (content: string): string => {
    if (last.content !== content) last = { content, key: crypto.randomUUID() }
    return last.key
  }
}
