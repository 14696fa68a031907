/** Names of the pages, in the menu and in the window's title. */
export default {
  home: 'Home',
  feeds: 'Feeds',
  feedNew: 'New feed',
  feedsBook: 'Book values',
  prices: 'Prices',
  imports: 'Import a price list',
  importsPast: 'Past imports',
  groups: 'Groups',
  groupNew: 'New group',
  mixes: 'Mixes',
  scenarios: 'Scenarios',
  scenariosCompare: 'Compare scenarios',
  reviews: 'Reviews',
  farm: 'Farm',
} as const
