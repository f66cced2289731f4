import type { Permission } from '#shared/schemas/permissions'

interface Place { key: string, to: string, permission: Permission }

const PLACES: readonly Place[] = [
  { key: 'today', to: '/', permission: 'home:read' },
  { key: 'patients', to: '/patients', permission: 'patient:read' },
  { key: 'sessions', to: '/sessions', permission: 'session:read' },
  { key: 'measures', to: '/measures', permission: 'measure:compute' },
  { key: 'clinic', to: '/clinic', permission: 'audit:read' },
]

/** The places of the house that this person's roles open, and which of them one is in. */
export function useNavigation() {
  const session = useSessionStore()
  const route = useRoute()
  const places = computed(() => PLACES.filter(place => session.may(place.permission)))
  const currentIndex = computed(() => places.value.findIndex(place => place.to === '/'
    ? route.path === '/'
    : route.path === place.to || route.path.startsWith(`${place.to}/`)))
  return { places, currentIndex }
}
