/** The clinic's day, the same on the server and in the browser while the page is put together. */
export function useToday() {
  const { zone } = useClinicFormat()
  const now = useState('now', () => new Date().toISOString())
  return computed(() => clinicDay(now.value, zone.value))
}
