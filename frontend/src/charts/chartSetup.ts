import {
  BarController,
  BarElement,
  CategoryScale,
  Chart,
  Filler,
  LinearScale,
  LineController,
  LineElement,
  PointElement,
} from 'chart.js'
import { draw } from 'patternomaly'
import { computed } from 'vue'
import { useTheme } from 'vuetify'
import type { Paint, Shape } from './paint'

Chart.register(
  BarController,
  BarElement,
  CategoryScale,
  Filler,
  LinearScale,
  LineController,
  LineElement,
  PointElement,
)
Chart.defaults.font.family = "'IBM Plex Sans', system-ui, sans-serif"
Chart.defaults.font.size = 12
Chart.defaults.animation = false
Chart.defaults.maintainAspectRatio = false

const canvasShapes: Record<Exclude<Shape, 'plain'>, Parameters<typeof draw>[0]> = {
  dots: 'dot',
  lines: 'line',
  diagonal: 'diagonal',
  antidiagonal: 'diagonal-right-left',
  vertical: 'line-vertical',
  cross: 'cross',
  plus: 'plus',
  rings: 'ring',
  zigzag: 'zigzag',
}

/** A name over several lines, so that it does not take the room of the bars. */
export function inLines(name: string, most = 18): string[] {
  const lines: string[] = []
  for (const word of name.split(' ')) {
    const last = lines.at(-1)
    if (last !== undefined && `${last} ${word}`.length <= most) lines[lines.length - 1] = `${last} ${word}`
    else lines.push(word)
  }
  return lines
}

/** A feed's colour and pattern for a canvas. */
export function canvasPaint(paint: Paint): string | CanvasPattern {
  return paint.shape === 'plain' ? paint.ground : draw(canvasShapes[paint.shape], paint.ground, paint.mark, 8)
}

/** Colours of the theme for axes, lines and words of a chart. */
export function useChartColours() {
  const theme = useTheme()
  return computed(() => {
    const colors = theme.current.value.colors
    const take = (name: string) => String(colors[name] ?? '#000000')
    return {
      ink: take('ink'),
      line: take('line'),
      paper: take('paper'),
      surface: take('surface'),
      beet: take('beet'),
      pasture: take('pasture'),
      straw: take('straw'),
      slate: take('slate'),
    }
  })
}
