import type { DefaultFigure, FirstMixDefaults, Phase } from './defaults'

/**
 * Substitution rate to start from: kg of free-choice forage dry matter left uneaten per kg of supplement dry matter.
 * In lactation it falls with the fibre of the forage; with the fibre unknown the middle band is taken.
 * @param forageNdf NDF of the forage, g per kg of dry matter
 */
export function defaultSubstitution(
  defaults: FirstMixDefaults,
  phase: Phase,
  forageNdf?: number,
): DefaultFigure {
  const bands = [...defaults.substitution.lactationByForageFiber].sort((a, b) => b.ndfFrom - a.ndfFrom)
  const known = defaults.substitution.byPhase[phase]
  if (known) return known
  const band =
    forageNdf === undefined
      ? bands[Math.floor(bands.length / 2)]
      : bands.find(({ ndfFrom }) => forageNdf >= ndfFrom)
  return band ?? defaults.substitution.rationed
}

/**
 * The forage an animal can eat alone before its gut is full, kg dry matter per head and day: a share of body weight as
 * NDF (1.2 to 1.8 %, by phase) ÷ the NDF fraction of the forage. Undefined where the fibre is unknown or nil.
 * @param forageNdf NDF of the forage, g per kg of dry matter
 */
export function fibreCapIntake(
  defaults: FirstMixDefaults,
  bodyWeightKg: number,
  phase: Phase,
  forageNdf: number | undefined,
): number | undefined {
  if (!forageNdf) return undefined
  return (defaults.fibreCap.byPhase[phase].value * bodyWeightKg) / (forageNdf / 1000)
}
