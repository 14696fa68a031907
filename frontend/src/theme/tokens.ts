/**
 * The palette. Names say what a colour is for: pasture leads, beet is cost at the margin, straw is prices, slate is
 * neutral data, clay is errors and cautions. Every text colour keeps at least 4.5 : 1 against paper and surface.
 */
export const light = {
  paper: '#FBF8F1',
  surface: '#FFFDF8',
  sunken: '#F3EEE1',
  line: '#E2DAC6',
  ink: '#23291F',
  pasture: '#3F6B3A',
  beet: '#8A2846',
  straw: '#D9A441',
  /** Straw dark enough for words. */
  strawInk: '#7A5412',
  slate: '#4C6272',
  clay: '#A84A24',
} as const

export const dark: Record<keyof typeof light, string> = {
  paper: '#1B1F18',
  surface: '#232820',
  sunken: '#161A13',
  line: '#3D4437',
  ink: '#ECE8DC',
  pasture: '#9CC790',
  beet: '#EB94AD',
  straw: '#E2B65E',
  strawInk: '#E2B65E',
  slate: '#A9BBC8',
  clay: '#EC9A76',
}
