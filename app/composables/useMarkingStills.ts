import type { Clip } from '#shared/schemas/clip'
import type { ClipStill, Still } from '#shared/schemas/still'

/** A frame must rest for so long before its marking is fetched: stepping past stills asks for nothing. */
const REST_MS = 120

export interface MarkingStillsOptions {
  readonly clip: Clip
  readonly stills: Ref<readonly ClipStill[]>
  /** The frame in sight, or `null` while nothing is to be marked (the clip plays, no picture yet). */
  readonly frame: Ref<number | null>
  readonly openStill: (stillId: string) => Promise<void>
}

/** The stills of a clip, which one is in sight, and how a frame becomes one. */
export function useMarkingStills({ clip, stills, frame, openStill }: MarkingStillsOptions) {
  const api = useApi()
  const isPicking = ref(false)
  const problem = shallowRef<ApiProblem | null>(null)
  const current = computed(() => stills.value.find(still => still.frame === frame.value) ?? null)

  watchDebounced(() => current.value?.id, (id) => {
    if (id) void openStill(id)
  }, { debounce: REST_MS, immediate: true })

  /** Makes the frame a still, or finds the one that it is already, and opens its marking. */
  async function pick(at: number) {
    if (isPicking.value) return
    isPicking.value = true
    problem.value = null
    try {
      const still = await api<Still>(`/api/clips/${clip.id}/stills`, { method: 'POST', body: { frame: at } })
      if (!stills.value.some(known => known.id === still.id)) stills.value = [...stills.value, { ...still, markings: [] }].toSorted((a, b) => a.frame - b.frame)
      await openStill(still.id)
    } catch (error) {
      problem.value = parseApiError(error)
    } finally {
      isPicking.value = false
    }
  }

  return { current, isPicking, problem, pick }
}
