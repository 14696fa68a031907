/** Letters that no decomposition takes apart, though the database's collation holds them for the same. */
const alike = new Map([
  ['ß', 'ss'],
  ['ø', 'o'],
  ['ł', 'l'],
  ['đ', 'd'],
  ['ð', 'd'],
  ['ħ', 'h'],
  ['ŧ', 't'],
  ['æ', 'ae'],
  ['œ', 'oe'],
])

/**
 * A name without case, accents, punctuation and invisible signs: what two spellings of one name have in common. Names
 * that the database holds for equal have one key.
 */
export function nameKey(name: string): string {
  const plain = name
    .normalize('NFKD')
    .replace(/[\p{M}\p{Cf}]/gu, '')
    .toLowerCase()
    .replace(/[ßøłđðħŧæœ]/g, (letter) => alike.get(letter) ?? letter)
    .replace(/[^\p{L}\p{N}]+/gu, ' ')
    .trim()
  return plain || name.trim().toLowerCase()
}

/** How alike two names are, 0 to 1: Dice's coefficient of their pairs of letters, words in any order. */
export function likeness(a: string, b: string): number {
  return dice(pairs(a), pairs(b))
}

export interface Named {
  id: string
  name: string
}

const suggestions = 3
const leastLikeness = 0.3

/** Finds feeds by their names, and the nearest ones for a name that is none of them. */
export class NameIndex<T extends Named> {
  readonly #byKey = new Map<string, T>()
  readonly #pairs: { item: T; pairs: Map<string, number> }[]

  /** Of two items with one key the first holds. */
  constructor(items: readonly T[]) {
    for (const item of items) {
      const key = nameKey(item.name)
      if (!this.#byKey.has(key)) this.#byKey.set(key, item)
    }
    this.#pairs = items.map((item) => ({ item, pairs: pairs(item.name) }))
  }

  find(name: string): T | undefined {
    return this.#byKey.get(nameKey(name))
  }

  nearest(name: string): T[] {
    const wanted = pairs(name)
    return this.#pairs
      .map(({ item, pairs: own }) => ({ item, score: dice(wanted, own) }))
      .filter(({ score }) => score >= leastLikeness)
      .sort((a, b) => b.score - a.score)
      .slice(0, suggestions)
      .map(({ item }) => item)
  }
}

function pairs(name: string): Map<string, number> {
  const counts = new Map<string, number>()
  for (const word of nameKey(name).split(' ')) {
    const padded = ` ${word} `
    for (let at = 0; at < padded.length - 1; at++) {
      const pair = padded.slice(at, at + 2)
      counts.set(pair, (counts.get(pair) ?? 0) + 1)
    }
  }
  return counts
}

function dice(a: ReadonlyMap<string, number>, b: ReadonlyMap<string, number>): number {
  let shared = 0
  for (const [pair, count] of a) shared += Math.min(count, b.get(pair) ?? 0)
  const total = sum(a) + sum(b)
  return total === 0 ? 0 : (2 * shared) / total
}

const sum = (counts: ReadonlyMap<string, number>): number =>
  [...counts.values()].reduce((all, count) => all + count, 0)
