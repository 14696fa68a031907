import type { Proof } from '@maslin/shared'
import type { Words } from './words'

export type ProofLevel = 'agreed' | 'certified' | 'disagreed' | 'open'

/**
 * How sure an answer is. `agreed` only where a second engine has found the same cost; a second engine that could not say
 * adds nothing to the certificate.
 */
export function proofLevel(proof: Proof): ProofLevel {
  if (proof.secondOpinion?.agrees === false) return 'disagreed'
  if (!proof.certified) return 'open'
  return proof.secondOpinion?.agrees === true ? 'agreed' : 'certified'
}

export const proofTitle = (proof: Proof, words: Words): string => words.t(`mixes.proof.${proofLevel(proof)}`)

/** A tiny figure as people of numbers write it; exact zero stays zero. */
const tiny = (value: number) => (value === 0 ? '0' : value.toExponential(1))

/** What the certificate and the second engine say, one sentence each. */
export function proofDetails(proof: Proof, words: Words): string[] {
  const { secondOpinion } = proof
  const lines = [
    words.t('mixes.proof.engine', { engine: proof.engine, milliseconds: words.q.number(proof.milliseconds) }),
    words.t(proof.certified ? 'mixes.proof.certificate' : 'mixes.proof.noCertificate', {
      violation: tiny(proof.worstViolation),
      gap: tiny(proof.costGap),
      tolerance: tiny(proof.tolerance),
    }),
  ]
  if (!secondOpinion) return [...lines, words.t('mixes.proof.noSecond')]
  const { engine, note } = secondOpinion
  const difference =
    secondOpinion.relativeDifference === undefined ? '' : tiny(secondOpinion.relativeDifference)
  if (secondOpinion.agrees === undefined)
    return [...lines, words.t('mixes.proof.secondSilent', { engine, note })]
  const key = secondOpinion.agrees ? 'secondAgrees' : 'secondDisagrees'
  return [...lines, words.t(`mixes.proof.${key}`, { engine, difference, note })]
}
