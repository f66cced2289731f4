import type { Timeline } from '#shared/schemas/timeline'
import type { Chart } from '#shared/schemas/patient'

export const TIMELINE_PERIODS = ['all', '2', '6', '12', '26'] as const
export type TimelinePeriod = typeof TIMELINE_PERIODS[number]

const WEEK_MS = 604_800_000
const DAY_MS = 86_400_000
const MONDAY_MS = 4 * DAY_MS
/** Shown until the person chooses: the lean of the trunk and the bend of the weaker knee. */
const FIRST_SHOWN = ['trunkInclination', 'kneeFlexion']

/** What of a timeline is looked at: period, measures, chart or table, the chosen day. All but the day live in the address. */
export function useTimelineView(timeline: Ref<Timeline>, chart: Ref<Chart>) {
  const route = useRoute()
  const router = useRouter()
  const { zone } = useClinicFormat()
  const read = (name: string) => typeof route.query[name] === 'string' ? String(route.query[name]) : ''
  const write = (name: string, value: string) => void router.replace({ query: { ...route.query, [name]: value || undefined } })

  const allDays = computed(() => toDays(timeline.value, zone.value))
  const period = computed<TimelinePeriod>({
    get: () => TIMELINE_PERIODS.find(name => name === read('weeks')) ?? 'all',
    set: name => write('weeks', name === 'all' ? '' : name),
  })
  const view = computed<'chart' | 'table'>({
    get: () => read('view') === 'table' ? 'table' : 'chart',
    set: name => write('view', name === 'table' ? 'table' : ''),
  })
  const days = computed(() => {
    const last = allDays.value.at(-1)
    if (period.value === 'all' || !last) return allDays.value
    return allDays.value.filter(day => day.noon > last.noon - Number(period.value) * WEEK_MS)
  })
  const series = computed(() => toSeries(days.value.flatMap(day => day.readings), chart.value.weakerSide))
  const shownKeys = computed<string[]>({
    get: () => {
      const wanted = read('measures').split(',').filter(key => series.value.some(one => one.key === key))
      return wanted.length > 0 || read('measures') === 'none' ? wanted : firstShown(series.value)
    },
    set: keys => write('measures', keys.join(',') || 'none'),
  })
  const shown = computed(() => series.value.filter(one => shownKeys.value.includes(one.key)))

  const chosenDay = ref('')
  const chosenIndex = computed({
    get: () => {
      const found = days.value.findIndex(day => day.day === chosenDay.value)
      return found < 0 ? days.value.length - 1 : found
    },
    set: (index) => { chosenDay.value = days.value[index]?.day ?? '' },
  })
  const chosen = computed(() => days.value[chosenIndex.value] ?? null)

  /** From the Monday before the first day to the Monday after the last. */
  const axis = computed(() => {
    const [first, last] = [days.value[0]?.noon ?? 0, days.value.at(-1)?.noon ?? 0]
    const from = Math.floor((first - DAY_MS / 2 - MONDAY_MS) / WEEK_MS) * WEEK_MS + MONDAY_MS
    return { from, to: Math.ceil((last + DAY_MS / 2 - MONDAY_MS) / WEEK_MS) * WEEK_MS + MONDAY_MS }
  })

  return { allDays, days, series, shown, shownKeys, period, view, chosen, chosenIndex, axis }
}

function firstShown(series: readonly TimelineSeries[]): string[] {
  const usual = series.filter(one => FIRST_SHOWN.includes(one.measure) && one.role !== 'stronger' && one.role !== 'left')
  return (usual.length > 0 ? usual : series.slice(0, 2)).map(one => one.key)
}
