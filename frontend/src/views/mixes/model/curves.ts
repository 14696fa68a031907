import type { Curve, CurveAlong } from '@maslin/shared'
import { placeIn } from './geometry'

export interface CurvePoint {
  /** On the shown axis. */
  x: number
  cost: number
  /** kg as fed by feed. */
  blend: Map<string, number>
}

/** The axis of a curve: stored values to shown ones and back. */
export interface CurveAxis {
  shown: (stored: number) => number
  stored: (shown: number) => number
}

/** Points of a curve on the shown axis. @param costFactor from the answer's cost basis to the one shown */
export function curvePoints(curve: Curve, axis: CurveAxis, costFactor: number): CurvePoint[] {
  return curve.points.map((point) => ({
    x: axis.shown(point.value),
    cost: point.cost * costFactor,
    blend: new Map(point.blend.map(({ feedId, kgAsFed }) => [feedId, kgAsFed])),
  }))
}

/** Feeds that the curve uses anywhere, those used most first. */
export function feedsAlong(points: readonly CurvePoint[]): string[] {
  const most = new Map<string, number>()
  for (const { blend } of points) {
    for (const [feedId, kg] of blend) most.set(feedId, Math.max(most.get(feedId) ?? 0, kg))
  }
  return [...most]
    .filter(([, kg]) => kg > 1e-9)
    .sort((a, b) => b[1] - a[1])
    .map(([feedId]) => feedId)
}

/**
 * Cost and amounts at a value between two points of the curve, both straight between them; undefined outside the curve.
 * At a step the side to the right holds.
 */
export function readCurve(points: readonly CurvePoint[], x: number): Omit<CurvePoint, 'x'> | undefined {
  const last = points.at(-1)
  const first = points[0]
  if (!first || !last || x < first.x || x > last.x) return undefined
  const index = points.findIndex((point) => point.x > x)
  const right = index < 0 ? last : points[index]
  const left = index < 0 ? last : points[index - 1]
  if (!right || !left) return undefined
  const share = right.x === left.x ? 0 : placeIn(x, { from: left.x, to: right.x })
  const between = (a: number, b: number) => a + (b - a) * share
  const ids = new Set([...left.blend.keys(), ...right.blend.keys()])
  return {
    cost: between(left.cost, right.cost),
    blend: new Map([...ids].map((id) => [id, between(left.blend.get(id) ?? 0, right.blend.get(id) ?? 0)])),
  }
}

/** Straight pieces of the cost along the curve: where each starts and ends, and how much one shown unit costs on it. */
export function pieces(points: readonly CurvePoint[]): { from: number; to: number; slope: number }[] {
  const all: { from: number; to: number; slope: number }[] = []
  const scale = Math.max(...points.map((point) => Math.abs(point.cost)), 1e-12)
  for (let index = 1; index < points.length; index++) {
    const left = points[index - 1]
    const right = points[index]
    if (!left || !right || right.x <= left.x) continue
    const slope = (right.cost - left.cost) / (right.x - left.x)
    const before = all.at(-1)
    const same = before && Math.abs(before.slope - slope) * (right.x - left.x) < scale * 1e-7
    if (before && same) before.to = right.x
    else all.push({ from: left.x, to: right.x, slope })
  }
  return all
}

export const sameAlong = (a: CurveAlong | undefined, b: CurveAlong | undefined): boolean =>
  JSON.stringify(a) === JSON.stringify(b)
