import type { Curve, CurveAlong, FormulationInput, MixDraft, OptimalAnswer, SolverFeed } from '@maslin/shared'
import type { ChartTable } from '../../../charts/csv'
import { pieces, type CurveAxis, type CurvePoint } from './curves'
import { limitOf } from './edits'
import { groupPeriodFactor, headDayFactor } from './margins'
import { limitName, measureOf, niceStep, type FeedName } from './measures'
import { packageOf, priceText } from './prices'
import { joined, plain, rich, type Run, type Words } from './words'

/** What a curve is about: its words, and its axis between stored and shown values. */
export interface CurveSubject extends CurveAxis {
  title: string
  /** Title of the axis with unit and basis. */
  axis: string
  unit: string
  /** Today's value as stored; undefined where only the curve knows it. */
  now: number | undefined
  /** A value with its unit. @param shown on the shown axis */
  text: (shown: number) => string
  /** A difference along the axis, with its unit. @param shown on the shown axis */
  difference: (shown: number) => string
}

interface Lookup {
  nameOf: FeedName
  feedOf: (feedId: string) => SolverFeed | undefined
}

function priceSubject(
  feedId: string,
  draft: MixDraft,
  { nameOf, feedOf }: Lookup,
  words: Words,
): CurveSubject {
  const feed = feedOf(feedId)
  const size = packageOf(feed, words)
  const sizeText = words.q.packageText(size.quantity, size.unit)
  const tried = draft.feeds.find((one) => one.feedId === feedId)?.pricePerKg
  return {
    title: words.t('mixes.curve.price', { name: nameOf(feedId) }),
    axis: words.t('mixes.curve.priceAxis', { size: sizeText }),
    unit: words.q.currency.value,
    now: tried === undefined ? feed?.pricePerKg : Number(tried),
    shown: (stored) => stored * size.kg,
    stored: (shown) => shown / size.kg,
    text: (shown) => priceText(shown / size.kg, size, words),
    difference: (shown) => priceText(shown / size.kg, size, words),
  }
}

/** Undefined where the limit is gone. */
export function curveSubject(
  along: CurveAlong,
  draft: MixDraft,
  lookup: Lookup,
  words: Words,
): CurveSubject | undefined {
  if (along.kind === 'price') return priceSubject(along.feedId, draft, lookup, words)
  const limit = limitOf(draft, along.limitId)
  if (!limit) return undefined
  const measure = measureOf(limit, draft.basis, words)
  return {
    title: words.t(along.side === 'min' ? 'mixes.curve.limitMin' : 'mixes.curve.limitMax', {
      name: limitName(limit, lookup.nameOf, words),
    }),
    axis: [measure.unit, measure.basis].filter(Boolean).join(' '),
    unit: measure.unit,
    now: limit[along.side],
    shown: measure.shown,
    stored: measure.stored,
    text: (shown) => measure.text(measure.stored(shown)),
    difference: measure.difference,
  }
}

/** How many straight pieces are told in words; the others stand in the table. */
const TOLD = 4

/** The curve in words: today's place, and the straight pieces around it with what a step costs on each. */
export function curveStory(
  curve: Curve,
  points: readonly CurvePoint[],
  subject: CurveSubject,
  answer: OptimalAnswer,
  input: FormulationInput,
  words: Words,
): { summary: string; runs: Run[] } {
  const first = points[0]
  const last = points.at(-1)
  if (!first || !last) return { summary: '', runs: [] }
  const all = pieces(points)
  const today = subject.shown(subject.now ?? curve.at)
  const toPeriod = groupPeriodFactor(answer, input) / headDayFactor(answer)
  const near = [...all]
    .sort((a, b) => away(a, today) - away(b, today))
    .slice(0, TOLD)
    .sort((a, b) => a.from - b.from)
  const sentences = near.map((piece) => pieceSentence(piece, subject, toPeriod, words))
  if (all.length > near.length) {
    const count = all.length - near.length
    sentences.push([plain(words.t('mixes.curve.more', { count }, count))])
  }
  const { from, to } = curve.possible
  if (from !== undefined)
    sentences.push(rich(words, 'mixes.curve.possibleFrom', { from: subject.text(subject.shown(from)) }))
  if (to !== undefined)
    sentences.push(rich(words, 'mixes.curve.possibleTo', { to: subject.text(subject.shown(to)) }))
  if (!curve.exact) sentences.push([plain(words.t('mixes.curve.sampled'))])
  const summary = words.t('mixes.curve.summary', {
    value: subject.text(today),
    cost: words.q.money(answer.cost.perHeadDay),
    from: subject.text(first.x),
    to: subject.text(last.x),
  })
  return { summary, runs: joined(sentences) }
}

type Piece = ReturnType<typeof pieces>[number]

const away = ({ from, to }: Piece, today: number): number =>
  today < from ? from - today : today > to ? today - to : 0

function pieceSentence(
  { from, to, slope }: Piece,
  subject: CurveSubject,
  toPeriod: number,
  words: Words,
): Run[] {
  const ends = { from: subject.text(from), to: subject.text(to) }
  const step = niceStep(Math.min(to - from || to, Math.abs(to) * 0.05))
  const change = slope * step * toPeriod
  if (Math.abs(change) < 0.005) return rich(words, 'mixes.curve.pieceFree', ends)
  return rich(words, change > 0 ? 'mixes.curve.pieceCosts' : 'mixes.curve.pieceSaves', {
    ...ends,
    step: subject.difference(step),
    amount: { text: words.q.money(Math.abs(change)), tone: change > 0 ? 'cost' : 'save' },
  })
}

/** The figures of the curve: the value, the cost, the amount of each feed in the farm's unit of weight. */
export function curveTable(
  points: readonly CurvePoint[],
  feeds: readonly string[],
  subject: CurveSubject | undefined,
  nameOf: FeedName,
  words: Words,
): ChartTable {
  const unit = words.q.unitLabel(words.q.weightUnit.value)
  return {
    head: [
      `${words.t('mixes.curve.value')} (${subject?.axis ?? ''})`,
      `${words.t('mixes.curve.cost')} (${words.q.currency.value})`,
      ...feeds.map((id) => words.t('mixes.curve.feedAmount', { name: nameOf(id), unit })),
    ],
    rows: points.map((point) => [
      Number(point.x.toPrecision(6)),
      Number(point.cost.toPrecision(6)),
      ...feeds.map((id) => Number(words.q.shownWeight(point.blend.get(id) ?? 0).toPrecision(6))),
    ]),
  }
}
