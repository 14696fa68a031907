/** Fields that read what people type. */
export default {
  readAs: 'read as {text}',
  required: 'Needed.',
  notANumber: 'Not a number. Write 12.5, 12,5 or 1/2.',
  unknownUnit: 'That unit is not known here. Use lb, kg, oz, g, cwt, ton or tonne.',
  bushel: 'A bushel weighs something else for every feed. Use lb or kg here.',
  tooSmall: 'At least {bound}.',
  tooLarge: 'At most {bound}.',
  notInteger: 'A whole number.',
  money: {
    notMoney: 'Not an amount of money. Write 19.20 or 12,50.',
    negative: 'A price is not below zero.',
    tooLarge: 'Too large an amount.',
    package: 'The package cannot be read. Write it as 19/50 lb.',
  },
  package: {
    label: 'Package',
    hint: 'such as 50 lb, 1 bu, 1/2 ton',
    empty: 'Needed, such as 50 lb.',
    notANumber: 'Not a weight. Write 50 lb, 25 kg or 1 bu.',
    unknownUnit: 'That unit is not known here. Use lb, kg, cwt, ton (2,000 lb), tonne (1,000 kg) or bu.',
    noUnit: 'Say the unit, such as lb or kg.',
    notPositive: 'More than zero.',
  },
} as const
