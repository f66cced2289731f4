const KG_PER_POUND = 0.45359237
const CM_PER_INCH = 2.54

/** Dates, times, masses and lengths in the clinic's time zone and units. Days are `2026-11-27`, moments ISO 8601. */
export function useClinicFormat() {
  const session = useSessionStore()
  const zone = computed(() => session.me?.clinic.timeZone ?? 'UTC')
  const isUs = computed(() => session.me?.clinic.units === 'us')
  const language = computed(() => isUs.value ? 'en-US' : 'en-GB')
  const dates = (options: Intl.DateTimeFormatOptions) => new Intl.DateTimeFormat(language.value, options)

  /** A moment or a day; a day has no zone of its own. */
  function show(when: string, options: Intl.DateTimeFormatOptions): string {
    const isDay = when.length === 10
    return dates({ ...options, timeZone: isDay ? 'UTC' : zone.value }).format(new Date(when)).replace(/\bSept\b/, 'Sep').replaceAll(',', '')
  }

  /** `9:15`, or `9:15 AM` in US clinics. Put together by hand: browsers and servers space it differently. */
  function time(moment: string): string {
    const parts = dates({ hour: 'numeric', minute: '2-digit', hour12: isUs.value, timeZone: zone.value }).formatToParts(new Date(moment))
    const part = (type: Intl.DateTimeFormatPartTypes) => parts.find(candidate => candidate.type === type)?.value ?? ''
    const hour = isUs.value ? part('hour') : String(Number(part('hour')) % 24)
    return [`${hour}:${part('minute')}`, part('dayPeriod').toUpperCase()].filter(Boolean).join(' ')
  }

  return {
    zone,
    isUs,
    language,
    time,
    /** `27 November` */
    day: (when: string) => show(when, { day: 'numeric', month: 'long' }),
    /** `27 Nov` */
    dayShort: (when: string) => show(when, { day: 'numeric', month: 'short' }),
    /** `27 Nov 2026` */
    dayWithYear: (when: string) => show(when, { day: 'numeric', month: 'short', year: 'numeric' }),
    /** `Friday 27 November` */
    dayWithWeekday: (when: string) => show(when, { weekday: 'long', day: 'numeric', month: 'long' }),
    moment: (when: string) => `${show(when, { day: 'numeric', month: 'short', year: 'numeric' })}, ${time(when)}`,
    dayOf: (moment: string) => clinicDay(moment, zone.value),
    clockOf: (moment: string) => clinicClock(moment, zone.value),
    massUnit: computed(() => isUs.value ? 'lb' : 'kg'),
    lengthUnit: computed(() => isUs.value ? 'in' : 'cm'),
    /** Kilograms as the clinic reads them, one decimal, without the unit. */
    massText: (kg: number) => trimmed(isUs.value ? kg / KG_PER_POUND : kg),
    mass: (kg: number) => `${trimmed(isUs.value ? kg / KG_PER_POUND : kg)} ${isUs.value ? 'lb' : 'kg'}`,
    massToKg: (shown: number) => isUs.value ? Math.round(shown * KG_PER_POUND * 1000) / 1000 : shown,
    lengthText: (cm: number) => trimmed(isUs.value ? cm / CM_PER_INCH : cm),
    length: (cm: number) => `${trimmed(isUs.value ? cm / CM_PER_INCH : cm)} ${isUs.value ? 'in' : 'cm'}`,
    lengthToCm: (shown: number) => isUs.value ? Math.round(shown * CM_PER_INCH * 100) / 100 : shown,
    percent: (value: number) => `${Math.round(value)} %`,
  }
}

/** At most one decimal, none when it is a zero. */
function trimmed(value: number): string {
  return String(Math.round(value * 10) / 10)
}
