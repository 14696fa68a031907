export default {
  title: 'Reviews',
  subtitle: 'Scenarios that wait for your decision, on all farms you advise.',
  none: {
    title: 'Nothing waits for you',
    text: 'When a farm that you advise asks for a review, the scenario appears here.',
  },
  farm: 'Farm',
  scenario: 'Scenario',
  group: 'For',
  submitted: 'Submitted',
  note: 'Asked',
} as const
