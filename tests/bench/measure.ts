/** The middle value. */
export function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Milliseconds that `work` takes. */
export async function timed(work: () => unknown): Promise<number> {
  const start = performance.now()
  await work()
  return performance.now() - start
}

/** Prints one ratio of medians, with its target where it has one; returns 1 where the target is missed. */
export function report(name: string, numerator: number[], denominator: number[], target?: number): number {
  const ratio = median(numerator) / median(denominator)
  const missed = target !== undefined && ratio > target
  const goal = target === undefined ? '' : `   target ≤ ${target}: ${missed ? 'MISSED' : 'met'}`
  console.log(`${name.padEnd(64)} ${ratio.toFixed(2).padStart(7)} ×${goal}`)
  return missed ? 1 : 0
}
