import VueKonva from 'vue-konva'

/** Registers the konva components (`v-stage`, `v-layer` and so on) in the browser; there is no canvas on the server. */
export default defineNuxtPlugin((nuxtApp) => {
  nuxtApp.vueApp.use(VueKonva)
})
