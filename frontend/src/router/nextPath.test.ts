import { expect, it } from 'vitest'
import { nextPath } from './nextPath'

it.each([
  ['/farms/f1/feeds?class=grain', '/farms/f1/feeds?class=grain'],
  ['//elsewhere.test', undefined],
  ['/\\elsewhere.test', undefined],
  ['https://elsewhere.test', undefined],
  ['', undefined],
  [undefined, undefined],
  [['/a', '/b'], undefined],
])('%j goes on to %j', (next, path) => {
  expect(nextPath(next === undefined ? {} : { next })).toBe(path)
})
