import { useI18n } from 'vue-i18n'
import { useQuantities } from '../../../composables/useQuantities'

export type Quantities = ReturnType<typeof useQuantities>

/** What sentence builders need: the catalogue and the farm's way to write figures. */
export interface Words {
  /** @param plural the number that picks the form of a message with several */
  t: (key: string, named?: Record<string, unknown>, plural?: number) => string
  /** Whether the catalogue has words for the key. */
  te: (key: string) => boolean
  q: Quantities
}

/** For components; call it in `setup`. */
export function useWords(): Words {
  const { t, te } = useI18n()
  return {
    t: (key, named = {}, plural) => (plural === undefined ? t(key, named) : t(key, named, plural)),
    te,
    q: useQuantities(),
  }
}

/** How a part of a sentence is set: `cost` and `save` are money at the margin. */
export type Tone = 'plain' | 'strong' | 'cost' | 'save'
export interface Run {
  text: string
  tone: Tone
}

export const strong = (text: string): Run => ({ text, tone: 'strong' })
export const plain = (text: string): Run => ({ text, tone: 'plain' })

const MARK = '\u0001'

/**
 * A message whose parameters may be set in a tone of their own: the catalogue keeps the order of words, the runs keep
 * what stands out.
 */
export function rich(words: Words, key: string, parts: Record<string, Run | string>, plural?: number): Run[] {
  const named: Record<string, unknown> = {}
  for (const [name, part] of Object.entries(parts)) {
    named[name] = typeof part === 'string' ? part : `${MARK}${name}${MARK}`
  }
  return words
    .t(key, named, plural)
    .split(MARK)
    .map((text, index): Run => {
      const part = index % 2 === 1 ? parts[text] : undefined
      return part && typeof part !== 'string' ? part : plain(text)
    })
    .filter((run) => run.text !== '')
}

/** The same words without tones, for screen readers, tables and files. */
export const textOf = (runs: readonly Run[]): string => runs.map((run) => run.text).join('')

/** Joins sentences with a space between. */
export const joined = (sentences: readonly Run[][]): Run[] =>
  sentences.flatMap((runs, index) => (index === 0 ? runs : [plain(' '), ...runs]))
