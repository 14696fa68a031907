import { createHash } from 'node:crypto'
import { answerSchema, formulationInputSchema, mixDraftSchema } from '@maslin/shared'
import canonicalize from 'canonicalize'
import { z } from 'zod'

/**
 * What a scenario revision keeps for good: the draft as the keeper left it, everything the solve needed, and the answer.
 * Stored as canonical JSON (RFC 8785), so that the same content always has the same text and the same hash.
 */
export const REVISION_CONTENT_VERSION = 1

const contentVersion1 = z.strictObject({
  schemaVersion: z.literal(1),
  draft: mixDraftSchema,
  input: formulationInputSchema,
  answer: answerSchema,
})
export type RevisionContent = z.infer<typeof contentVersion1>

/** Every shape ever stored, by its version, with the way from it to today's. */
const readers: Record<number, (stored: unknown) => RevisionContent> = {
  1: (stored) => contentVersion1.parse(stored),
}

/** Why a stored revision cannot be trusted or read. */
export class DamagedContentError extends Error {
  constructor(
    readonly damage: 'altered' | 'unreadable' | 'unknownVersion',
    options?: ErrorOptions,
  ) {
    super(`the stored revision is ${damage}`, options)
    this.name = 'DamagedContentError'
  }
}

/** SHA-256 of the stored text, hexadecimal. */
export function contentHashOf(text: string): string {
  return createHash('sha256').update(text, 'utf8').digest('hex')
}

/**
 * The text to store and its hash.
 * Throws a ZodError where the content does not fit its schema (a number that is not finite, for example).
 */
export function writeRevisionContent(content: Omit<RevisionContent, 'schemaVersion'>): {
  text: string
  hash: string
  schemaVersion: number
} {
  const checked = contentVersion1.parse({ schemaVersion: REVISION_CONTENT_VERSION, ...content })
  const text = canonicalize(checked)
  if (text === undefined) throw new TypeError('the content has no JSON form')
  return { text, hash: contentHashOf(text), schemaVersion: REVISION_CONTENT_VERSION }
}

/**
 * Reads a stored revision of any version into today's shape.
 * Throws a DamagedContentError where the text no longer matches its hash, or cannot be read.
 */
export function readRevisionContent(text: string, hash: string): RevisionContent {
  if (contentHashOf(text) !== hash) throw new DamagedContentError('altered')
  try {
    const stored: unknown = JSON.parse(text)
    const read = readers[versionOf(stored)]
    if (!read) throw new DamagedContentError('unknownVersion')
    return read(stored)
  } catch (error) {
    if (error instanceof DamagedContentError) throw error
    throw new DamagedContentError('unreadable', { cause: error })
  }
}

function versionOf(stored: unknown): number {
  return z.object({ schemaVersion: z.number() }).parse(stored).schemaVersion
}
