import { findLandmark } from '#shared/geometry/landmarks'

/** Names of what the measuring core speaks of by id. */
export function useMeasureText() {
  const { t } = useI18n()
  return {
    /** The landmark's name, with its side in frontal views. */
    landmarkName: (id: string): string => {
      const landmark = findLandmark(id)
      return landmark ? t(landmark.nameKey) : id
    },
  }
}
