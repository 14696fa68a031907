export default {
  owner: 'Owner',
  manager: 'Manager',
  hand: 'Hand',
  advisor: 'Advisor',
  what: {
    owner: 'may do everything, and says who else is a member',
    manager: 'keeps feeds, prices, groups, mixes and scenarios',
    hand: 'reads everything, changes nothing',
    advisor: 'reads everything, tries values out, comments, approves or returns scenarios',
  },
} as const
