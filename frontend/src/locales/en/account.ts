export default {
  title: 'Your account',
  menu: '{initials}: your account',
  signOut: 'Sign out',
  appearance: { label: 'Appearance', system: 'As the device', light: 'Light', dark: 'Dark' },
  fields: {
    name: 'Your name',
    email: 'E-mail address',
    password: 'Password',
    passwordHint: 'At least 10 characters; a few words in a row are best.',
    farmName: 'Name of the farm',
    units: 'Weights and packages',
    currency: 'Currency',
    showPassword: 'Show the password',
    hidePassword: 'Hide the password',
    badEmail: 'Not an e-mail address.',
    shortPassword: 'At least 10 characters.',
    missing: 'Needed.',
  },
  signIn: {
    name: 'Sign in',
    submit: 'Sign in',
    noAccount: 'No account yet?',
    ended: 'Your session has ended. Sign in to go on where you were; what is saved is kept.',
    unreachable: 'The server does not answer at the moment. You will be taken on to your page once it does.',
  },
  signUp: {
    name: 'Create an account',
    short: 'Create an account',
    you: 'You',
    farm: 'Your farm',
    text: 'A farm keeps its own feeds, prices, groups and mixes. You become its owner and can add others later.',
    submit: 'Create the account and the farm',
    haveAccount: 'Have an account?',
    currencyNote: 'Prices keep the currency they are given in.',
  },
  landing: {
    title: 'The cheapest mix that feeds them right, and why',
    lead: 'Maslin is for people who mix their own feed. Say what the animals are and what the feeds cost: it finds the mix of least cost that meets their needs and shows what each need costs you.',
    points: {
      needs: {
        title: 'Needs from published tables',
        text: 'By species, stage and weight, each with its source beside it. Change a figure where you know better, with a reason.',
      },
      prices: {
        title: 'Prices as your suppliers send them',
        text: 'Drop a price list, look at every row before it counts, or type $19/50 lb.',
      },
      why: {
        title: 'Why this mix',
        text: 'Which limits cost money and how much, at what price a feed would come in, and what has to give when no mix is possible.',
      },
      review: {
        title: 'A second pair of eyes',
        text: 'Save a scenario, hand it to your advisor, keep what was approved.',
      },
    },
    caution:
      'A mix is no substitute for looking at the animals. Follow the label, local rules, your veterinarian and your nutritionist.',
    oldWord: 'Maslin: grains sown and milled together; two grains in one sack.',
  },
  noFarm: {
    title: 'You are not a member of a farm',
    text: 'Ask the owner of a farm to add you with the e-mail address {email}.',
  },
} as const
