import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import {
  contentHashOf,
  DamagedContentError,
  readRevisionContent,
  REVISION_CONTENT_VERSION,
  writeRevisionContent,
} from './revisionContent'

const fixture = (version: number) =>
  readFileSync(
    fileURLToPath(new URL(`../../../tests/api/fixtures/revision-v${version}.json`, import.meta.url)),
    'utf8',
  ).trimEnd()

/** SHA-256 of each fixture, written down when it was made. */
const hashes: Record<number, string> = {
  1: 'd8e645d93c095ccca6de7d5884cb93ad369053a7c343216c6f078109f7d02cfd',
}

describe('stored revisions', () => {
  it.each(Object.keys(hashes).map(Number))('opens version %i as it was stored', (version) => {
    const text = fixture(version)
    const content = readRevisionContent(text, hashes[version] ?? '')
    expect(content.schemaVersion).toBe(REVISION_CONTENT_VERSION)
    expect(content.draft.name).toBe('Ewes, four weeks before lambing')
    expect(content.answer.status).toBe('optimal')
  })

  it('writes the same text and hash for the same content, whatever the order of its fields', () => {
    const { schemaVersion, ...content } = readRevisionContent(fixture(1), hashes[1] ?? '')
    expect(schemaVersion).toBe(1)
    const reversed = Object.fromEntries(Object.entries(content).reverse()) as typeof content
    expect(writeRevisionContent(reversed)).toEqual({ text: fixture(1), hash: hashes[1], schemaVersion: 1 })
  })

  it('notices a single changed digit', () => {
    const text = fixture(1)
    const altered = text.replace('"heads":40', '"heads":41')
    expect(altered).not.toBe(text)
    expect(() => readRevisionContent(altered, hashes[1] ?? '')).toThrow(DamagedContentError)
  })

  it.each([
    { name: 'no JSON', text: '{', damage: 'unreadable' },
    { name: 'no version', text: '{}', damage: 'unreadable' },
    { name: 'a version from the future', text: '{"schemaVersion":999}', damage: 'unknownVersion' },
    { name: 'a version without its content', text: '{"schemaVersion":1}', damage: 'unreadable' },
  ])('says what is wrong with $name', ({ text, damage }) => {
    expect(() => readRevisionContent(text, contentHashOf(text))).toThrow(
      expect.objectContaining({ damage }) as Error,
    )
  })

  it('refuses numbers that JSON cannot carry', () => {
    const { draft, input, answer } = readRevisionContent(fixture(1), hashes[1] ?? '')
    const broken = { draft: { ...draft, batchDryMatterKg: NaN }, input, answer }
    expect(() => writeRevisionContent(broken)).toThrow()
  })
})
