import type { Caution } from '@maslin/shared'
import type { Words } from './words'

/** Figures of a caution as its sentence shows them; feed ids and the like stay as they are. */
function figures(caution: Caution, words: Words): Record<string, string> {
  return Object.fromEntries(
    Object.entries(caution.params).map(([name, value]) => [
      name,
      typeof value === 'number'
        ? name.toLowerCase().endsWith('share')
          ? words.q.percent(value, 0)
          : words.q.significant(value)
        : name === 'nutrient'
          ? words.t(`nutrients.${value}`).toLocaleLowerCase()
          : value,
    ]),
  )
}

const known = (caution: Caution, words: Words) => words.te(`cautions.codes.${caution.code}.title`)

/** A code without words of its own is shown as it is: a caution is never dropped. */
export const cautionTitle = (caution: Caution, words: Words): string =>
  known(caution, words)
    ? words.t(`cautions.codes.${caution.code}.title`, figures(caution, words))
    : words.t('cautions.unknownTitle', { code: caution.code })

export function cautionText(caution: Caution, words: Words): string {
  if (known(caution, words)) return words.t(`cautions.codes.${caution.code}.text`, figures(caution, words))
  const values = Object.entries(figures(caution, words)).map(([name, value]) => `${name} ${value}`)
  return words.t('cautions.unknownText', { source: caution.source, values: values.join(', ') })
}

const weights: Record<Caution['level'], number> = { block: 0, acknowledge: 1, warn: 2, note: 3 }

/** Gravest first. */
export const byGravity = (cautions: readonly Caution[]): Caution[] =>
  [...cautions].sort((a, b) => weights[a.level] - weights[b.level])

/** Those that stand at the head of the page too. */
export const isSerious = ({ level }: Caution): boolean => level === 'block' || level === 'acknowledge'
