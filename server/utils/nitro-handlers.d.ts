/** The list of the built server's routes, which Nitro makes at build time. */
declare module '#nitro-internal-virtual/server-handlers' {
  export const handlers: readonly { route?: string, method?: string, lazy?: boolean, middleware?: boolean, handler: () => Promise<unknown> }[]
}
