import type { CurveAlong } from '@maslin/shared'
import { computed } from 'vue'
import { useDisplay } from 'vuetify'
import { useBench } from './context'
import { sameAlong } from './model/curves'

/** Width from which the curve stands beside the page instead of under its row, px. */
export const WIDE = 1240

/** Whether one feed or limit is the thing whose curve is drawn, and where its curve stands. */
export function useFocus(along: () => CurveAlong) {
  const { focus } = useBench()
  const { width } = useDisplay()
  const isFocused = computed(() => sameAlong(focus.value, along()))
  return {
    isFocused,
    /** The curve stands under the row itself. */
    isInline: computed(() => isFocused.value && width.value < WIDE),
    toggle: () => {
      focus.value = isFocused.value ? undefined : along()
    },
  }
}
