import {
  answerSchema,
  formulationInputSchema,
  mixDraftSchema,
  type Answer,
  type FormulationInput,
  type InfeasibleAnswer,
  type MixDraft,
  type OptimalAnswer,
  type SolveResponse,
  type SolverFeed,
} from '@maslin/shared'

/** One solved example for tests: 38 ewes beside hay, four feeds in the mix, two left out. Every figure is invented. */
const id = (last: number) => `0190a0a0-0000-7000-8000-0000000000${String(last).padStart(2, '0')}`

export const ids = {
  mix: id(1),
  group: id(2),
  hay: id(10),
  corn: id(11),
  soybeanMeal: id(12),
  hulls: id(13),
  limestone: id(14),
  barley: id(15),
  urea: id(16),
  oats: id(17),
}

function feed(
  feedId: string,
  name: string,
  feedClass: SolverFeed['class'],
  more: Partial<SolverFeed> = {},
): SolverFeed {
  return {
    id: feedId,
    name,
    class: feedClass,
    dryMatter: 0.89,
    forage: false,
    ruminantOrigin: 'no',
    nonProteinNitrogen: 0,
    addedCopper: false,
    ionophore: false,
    values: { crudeProtein: { value: 100, status: 'read' } },
    ...more,
  }
}

const offer = (supplierName: string, price: string, quantity: number, unit: string, kg: number) => ({
  pricePerKg: Number(price) / kg,
  priceOrigin: {
    supplierName,
    packageQuantity: quantity,
    packageUnit: unit,
    packageKg: kg,
    price,
    date: '2026-11-24',
  },
})

export const draft: MixDraft = mixDraftSchema.parse({
  name: 'Twin-bearing ewes, last four weeks',
  groupId: ids.group,
  basis: 'besideForage',
  pricesAsOf: '2026-11-24',
  feeds: [ids.corn, ids.soybeanMeal, ids.hulls, ids.limestone, ids.barley, ids.urea, ids.oats].map(
    (feedId) => ({
      feedId,
    }),
  ),
  limits: [
    {
      id: 'energy',
      kind: 'nutrient',
      nutrient: 'metabolizableEnergy',
      measure: 'perHeadDay',
      min: 4.4,
      source: 'NRC 1985, Table 1',
      status: 'memory',
    },
    {
      id: 'protein',
      kind: 'nutrient',
      nutrient: 'crudeProtein',
      measure: 'perHeadDay',
      min: 214,
      source: 'NRC 1985, Table 1',
      status: 'memory',
    },
    {
      id: 'starch',
      kind: 'nutrient',
      nutrient: 'starch',
      measure: 'perKgDryMatter',
      max: 200,
      source: 'common practice',
    },
    { id: 'caP', kind: 'ratio', numerator: 'calcium', denominator: 'phosphorus', min: 1.5 },
    {
      id: 'forage',
      kind: 'feeds',
      of: { by: 'forage' },
      measure: 'shareOfDryMatter',
      within: 'diet',
      min: 0.5,
    },
    { id: 'copper', kind: 'nutrient', nutrient: 'copper', measure: 'perKgDryMatter', max: 15 },
  ],
})

export const input: FormulationInput = formulationInputSchema.parse({
  version: 1,
  basis: 'besideForage',
  batchDryMatterKg: 1000,
  currency: 'USD',
  pricesAsOf: '2026-11-24',
  group: {
    id: ids.group,
    name: 'Lower barn',
    species: 'sheep',
    class: 'ewe',
    stage: 'latePregnancy',
    male: false,
    young: false,
    phase: 'latePregnancy',
    bodyWeightKg: 70,
    heads: 38,
    equidsCanReach: false,
    intakeDryMatterKg: 1.8,
    requirementSource: 'NRC 1985, Table 1',
    needs: [],
  },
  baseDiet: [
    {
      feedId: ids.hay,
      mode: 'freeChoice',
      dryMatterKg: 1.4,
      wasteShare: 0.1,
      substitutionRate: 0.63,
      origin: 'fibreCap',
    },
  ],
  baseFeeds: [feed(ids.hay, 'Meadow hay', 'dryForage', { forage: true, pricePerKg: 0.18 })],
  feeds: [
    feed(ids.corn, 'Corn, cracked', 'grain', offer('East Mill', '8.10', 1, 'bushel', 25.4)),
    feed(
      ids.soybeanMeal,
      'Soybean meal, 48',
      'proteinMeal',
      offer('East Mill', '452', 1, 'shortTon', 907.18474),
    ),
    feed(ids.hulls, 'Soybean hulls', 'byProduct', offer('Hill Farm Supply', '9.20', 50, 'lb', 22.6796185)),
    feed(ids.limestone, 'Limestone', 'mineral', offer('Hill Farm Supply', '7.50', 50, 'lb', 22.6796185)),
    feed(ids.barley, 'Barley, rolled', 'grain', offer('Hill Farm Supply', '11.40', 50, 'lb', 22.6796185)),
    feed(ids.urea, 'Urea', 'other', offer('East Mill', '30', 50, 'lb', 22.6796185)),
    feed(ids.oats, 'Oats', 'grain'),
  ],
  limits: draft.limits,
  assumedHighs: {},
})

const proof = {
  engine: 'highs',
  certified: true,
  worstViolation: 3e-13,
  costGap: 2e-12,
  tolerance: 1e-7,
  milliseconds: 4,
}

export const optimal: OptimalAnswer = answerSchema.parse({
  version: 1,
  status: 'optimal',
  costBasis: 'headDay',
  blend: [
    part(ids.corn, 0.535, 0.7, 0.17, 0.319, { high: 0.458 }),
    part(ids.soybeanMeal, 0.136, 0.18, 0.068, 0.498, { low: 0.444, high: 0.615 }),
    part(ids.hulls, 0.091, 0.115, 0.037, 0.406, { low: 0.304, high: 0.453 }),
    part(ids.limestone, 0.005, 0.005, 0.002, 0.33, {}),
  ],
  leftOut: [
    {
      feedId: ids.barley,
      reason: 'price',
      pricePerKg: 0.503,
      buyInPrice: 0.328,
      thenShareAsFed: 0.34,
      replaces: ids.corn,
    },
    { feedId: ids.urea, reason: 'nonProteinNitrogen', pricePerKg: 1.32 },
    { feedId: ids.oats, reason: 'noPrice' },
  ],
  cautions: [
    {
      code: 'copperAcknowledge',
      level: 'acknowledge',
      params: { totalPerKg: 15.4, knownPerKg: 9.5, assumedShare: 0.38, limit: 15, origin: 'book' },
      feedIds: [ids.soybeanMeal],
      source: 'NRC 1985',
      status: 'read',
    },
  ],
  totals: { kgAsFed: 0.767, kgDryMatter: 0.68, dryMatterShare: 0.887 },
  cost: {
    least: 0.525,
    mix: 0.277,
    baseDiet: 0.248,
    mixPerKgAsFed: 0.361,
    mixPerKgDryMatter: 0.407,
    perHeadDay: 0.525,
    perGroup30Days: 598.5,
    unpricedBaseFeeds: [],
  },
  baseDiet: [{ feedId: ids.hay, kgDryMatter: 0.98, kgAsFed: 1.1, kgOffered: 1.22 }],
  limits: [
    {
      limitId: 'energy',
      value: 4.4,
      min: 4.4,
      state: 'costs',
      bindingSide: 'min',
      assumedShare: 0,
      unknownFeeds: [],
      raise: { perUnit: 0.19254, until: 4.62, impossible: false },
      lower: { perUnit: -0.19254, until: 4.31, impossible: false },
      differs: false,
    },
    {
      limitId: 'protein',
      value: 214,
      min: 214,
      state: 'costs',
      bindingSide: 'min',
      assumedShare: 0,
      unknownFeeds: [],
      raise: { perUnit: 0.0001491, until: 233, impossible: false },
      lower: { perUnit: -0.0001491, until: 189, impossible: false },
      differs: false,
    },
    {
      limitId: 'starch',
      value: 200,
      max: 200,
      state: 'costs',
      bindingSide: 'max',
      assumedShare: 0,
      unknownFeeds: [],
      raise: { perUnit: -0.000403, until: 231, impossible: false },
      lower: { impossible: true },
      differs: true,
    },
    {
      limitId: 'caP',
      value: 1.9,
      min: 1.5,
      state: 'room',
      assumedShare: 0,
      unknownFeeds: [],
      differs: false,
    },
    {
      limitId: 'forage',
      value: 0.59,
      min: 0.5,
      state: 'room',
      assumedShare: 0,
      unknownFeeds: [],
      differs: false,
    },
    {
      limitId: 'copper',
      value: 9.1,
      max: 15,
      state: 'notCheckable',
      assumedShare: 0.38,
      unknownFeeds: [ids.hulls],
      differs: false,
    },
  ],
  supply: [
    {
      nutrient: 'metabolizableEnergy',
      amount: 4.4,
      fromBaseDiet: 2,
      perKgDryMatter: 2.65,
      unknownShare: 0,
      parts: [
        { feedId: ids.hay, amount: 2, base: true },
        { feedId: ids.corn, amount: 1.6, base: false },
        { feedId: ids.soybeanMeal, amount: 0.5, base: false },
        { feedId: ids.hulls, amount: 0.3, base: false },
      ],
    },
    {
      nutrient: 'crudeProtein',
      amount: 214,
      fromBaseDiet: 88,
      perKgDryMatter: 129,
      unknownShare: 0,
      parts: [
        { feedId: ids.hay, amount: 88, base: true },
        { feedId: ids.corn, amount: 48, base: false },
        { feedId: ids.soybeanMeal, amount: 66, base: false },
        { feedId: ids.hulls, amount: 12, base: false },
      ],
    },
  ],
  degenerate: true,
  proof,
}) as OptimalAnswer

function part(
  feedId: string,
  kgAsFed: number,
  shareAsFed: number,
  cost: number,
  pricePerKg: number,
  priceWindow: { low?: number; high?: number },
) {
  return {
    feedId,
    kgAsFed,
    kgDryMatter: kgAsFed * 0.89,
    shareAsFed,
    shareOfDryMatter: shareAsFed,
    cost,
    pricePerKg,
    priceWindow,
  }
}

export const infeasible: InfeasibleAnswer = answerSchema.parse({
  version: 1,
  status: 'infeasible',
  leftOut: [],
  cautions: [],
  conflict: [
    { limitId: 'protein', side: 'min' },
    { limitId: 'starch', side: 'max' },
  ],
  proposals: [
    { loosenings: [{ limitId: 'protein', side: 'min', from: 214, to: 190 }], leastCost: 0.5 },
    { loosenings: [{ limitId: 'starch', side: 'max', from: 200, to: 260 }] },
  ],
  proof,
}) as InfeasibleAnswer

export const responseOf = (answer: Answer): SolveResponse => ({ input, answer })
