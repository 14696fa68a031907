/** Warnings tied to species, class and stage, by the solver's codes. Where an animal can be hurt, local rules, the label, the veterinarian and the nutritionist come first. */
export default {
  why: 'Why, and from where',
  hide: 'Less',
  feeds: 'Feeds: {names}.',
  source: 'Source: {source} ({status}).',
  defer:
    'Local rules, the label, your veterinarian and your nutritionist come before this page; a sick animal is the veterinarian’s case.',
  levels: {
    note: 'For your information.',
    warn: 'Look at this before feeding.',
    acknowledge: 'Has to be acknowledged before an approval.',
    block: 'Stands in the way of an approval until it is gone.',
  },
  unknownTitle: 'A caution without words here ({code}).',
  unknownText: 'Source: {source}. {values}',
  acknowledge: 'I have seen this and take it into account',
  codes: {
    addedCopperLeftOut: {
      title: 'Added copper, sheep.',
      text: 'A feed with added copper was left out: sheep store copper and can die of it.',
    },
    addedCopperInBaseDiet: {
      title: 'Added copper in the base diet, sheep.',
      text: 'The group gets a feed with added copper. Sheep store copper and can die of it: take that feed away, and ask a veterinarian about the animals that ate it.',
    },
    ruminantOriginLeftOut: {
      title: 'Feed of ruminant origin.',
      text: 'A feed made from ruminants was left out: it may not be fed to ruminants.',
    },
    ruminantOriginInBaseDiet: {
      title: 'Feed of ruminant origin in the base diet.',
      text: 'The group gets a feed made from ruminants, which may not be fed to ruminants. Take it away.',
    },
    ruminantOriginExempt: {
      title: 'Milk or blood product.',
      text: 'A feed of ruminant origin is used that some laws exempt and others do not. Look up the rule of the place.',
    },
    nonProteinNitrogenLeftOut: {
      title: 'Urea or the like.',
      text: 'A feed with non-protein nitrogen was left out: it can poison young animals and those without a working rumen, and sheep and goats where it is not fed with great care.',
    },
    nonProteinNitrogenInBaseDiet: {
      title: 'Urea or the like in the base diet.',
      text: 'The group gets non-protein nitrogen, which can poison it. Take it away, or have a nutritionist look at it.',
    },
    nonProteinNitrogenAdult: {
      title: 'Urea or the like.',
      text: 'Non-protein nitrogen is only for grown ruminants that were led up to it slowly, well mixed, never to hungry animals. Follow the label.',
    },
    ionophoreLeftOut: {
      title: 'Ionophore, horses near.',
      text: 'A feed with an ionophore was left out: a little of it kills horses and donkeys, and some can reach this feed.',
    },
    ionophoreInBaseDiet: {
      title: 'Ionophore in the base diet, horses near.',
      text: 'The group gets a feed with an ionophore where horses or donkeys can reach it. A little of it kills them: take it away.',
    },
    ionophoreLabel: {
      title: 'Ionophore.',
      text: 'A feed with an ionophore is used. It is for the species on its label only, at the rate on its label; keep horses, donkeys and dogs away.',
    },
    belowNeed: {
      title: 'Less than these animals need.',
      text: 'The diet brings {share} of the {nutrient} that the requirement asks for. The cheapest mix for lower limits is no feed for these animals.',
    },
    copperLow: {
      title: 'Copper, sheep.',
      text: 'The diet holds {totalPerKg} mg of copper per kg of dry matter, {assumedShare} of it assumed; that is not above {limit}. No added copper may go in.',
    },
    copperWarn: {
      title: 'Copper, sheep.',
      text: 'The diet holds {totalPerKg} mg of copper per kg of dry matter, {assumedShare} of it assumed; above {limit} sheep slowly store it. No added copper may go in.',
    },
    copperAcknowledge: {
      title: 'Much copper, sheep.',
      text: 'The diet may hold {totalPerKg} mg of copper per kg of dry matter ({knownPerKg} by known values, {assumedShare} assumed); above {limit} it is dangerous for sheep. Have the feeds tested.',
    },
    copperBlock: {
      title: 'Too much copper, sheep.',
      text: 'By tested values the diet holds {knownPerKg} mg of copper per kg of dry matter, above {limit}. Do not feed it to sheep; change the feeds.',
    },
    copperNotCheckable: {
      title: 'Copper cannot be told, sheep.',
      text: 'Most of the copper is assumed ({assumedShare}): the diet may hold {totalPerKg} mg per kg of dry matter, and above {limit} it is dangerous for sheep. Have the feeds tested.',
    },
  },
} as const
