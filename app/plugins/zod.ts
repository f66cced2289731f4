import { z } from 'zod'

/** Zod compiles its checks with `new Function`, which the content security policy refuses: plain checks instead. */
export default defineNuxtPlugin(() => {
  z.config({ jitless: true })
})
