/** The title of the browser's tab; the name of the program is added by the app. */
export function usePageTitle(title: MaybeRefOrGetter<string>) {
  useHead({ title: computed(() => toValue(title)) })
}
