import type { Still } from '#shared/schemas/still'
import type { FrameReader, FrameReaderOptions } from './useFrameDecoder'

/**
 * Frames as pictures cut by the server, for browsers without a decoder. Each picture is the still of that frame,
 * so the same frame again costs nothing new.
 */
export function useFrameServer(clipId: string) {
  const api = useApi()

  function openFrameServer(options: Pick<FrameReaderOptions, 'onPicture'>): FrameReader {
    const controller = new AbortController()
    return {
      async read(frame) {
        const still = await api<Still>(`/api/clips/${clipId}/stills`, { method: 'POST', body: { frame }, signal: controller.signal })
        if (still.frame !== frame) throw new Error('the server answered with another frame')
        const answer = await fetch(`/api/stills/${still.id}/image`, { signal: controller.signal })
        if (!answer.ok) throw new Error(`the picture of the frame answered ${answer.status}`)
        options.onPicture({ frame, image: await createImageBitmap(await answer.blob()) })
      },
      close: () => controller.abort(),
    }
  }

  return { openFrameServer }
}
