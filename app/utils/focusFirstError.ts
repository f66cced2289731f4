/** Moves the focus to the first field of a form that is marked as wrong, once the page shows it. */
export async function focusFirstError(form: HTMLElement | null | undefined): Promise<void> {
  await nextTick()
  const field = form?.querySelector('[aria-invalid=true]')
  if (field instanceof HTMLElement) field.focus()
}
