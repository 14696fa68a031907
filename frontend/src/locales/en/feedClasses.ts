export default {
  dryForage: 'Dry forage',
  wetForage: 'Wet forage',
  grain: 'Grain',
  byProduct: 'By-product',
  proteinMeal: 'Protein meal',
  fat: 'Fat',
  molasses: 'Molasses',
  mineral: 'Mineral',
  premix: 'Premix',
  other: 'Other',
} as const
