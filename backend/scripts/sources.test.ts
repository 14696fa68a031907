import { mkdirSync, mkdtempSync, rmSync, utimesSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, relative } from 'node:path'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { projectRoot } from './paths.mjs'
import { digestOf, isBuiltFrom, noteBuiltFrom } from './sources.mjs'

let directory: string
const digest = () => digestOf([relative(projectRoot, directory)])

beforeEach(() => {
  directory = mkdtempSync(join(tmpdir(), 'maslin-sources-'))
  mkdirSync(join(directory, 'deep'))
  writeFileSync(join(directory, 'deep', 'code.ts'), 'one')
})

afterEach(() => rmSync(directory, { recursive: true, force: true }))

it('changes with contents, names and files that come and go', () => {
  const seen = [digest()]
  writeFileSync(join(directory, 'deep', 'code.ts'), 'two')
  seen.push(digest())
  writeFileSync(join(directory, 'more.ts'), '')
  seen.push(digest())
  rmSync(join(directory, 'deep'), { recursive: true })
  seen.push(digest())
  expect(new Set(seen).size).toBe(4)
})

it('stays the same when only a time or a test changes', () => {
  const before = digest()
  utimesSync(join(directory, 'deep', 'code.ts'), new Date(0), new Date(0))
  writeFileSync(join(directory, 'deep', 'code.test.ts'), 'a test')
  expect(digest()).toBe(before)
})

it('knows what a directory was built from', () => {
  expect(isBuiltFrom(directory, digest())).toBe(false)
  noteBuiltFrom(directory, 'a')
  expect(isBuiltFrom(directory, 'a')).toBe(true)
  expect(isBuiltFrom(directory, 'b')).toBe(false)
})
