/** Says something to screen readers through the live region of the layout; the same words again are said again. */
export function useAnnounce() {
  const message = useState('announcement', () => ({ text: '', count: 0 }))
  function announce(text: string) {
    message.value = { text, count: message.value.count + 1 }
  }
  return { message, announce }
}
