import { MAX_IMPORT_CHARACTERS } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { readListBytes } from './listFile'

const bytes = (...values: number[]) => new Uint8Array(values)
const utf8 = (text: string) => new TextEncoder().encode(text)

describe('a price list', () => {
  it.each([
    ['UTF-8', utf8('Mühle;12,50'), 'Mühle;12,50'],
    ['UTF-8', utf8('\ufeffMühle;1'), 'Mühle;1'],
    ['Windows-1252', bytes(0x4d, 0xfc, 0x68, 0x6c, 0x65, 0x3b), 'Mühle;'],
    ['UTF-16', bytes(0xff, 0xfe, 0x41, 0, 0x3b, 0), 'A;'],
  ])('is read as %s', (encoding, content, text) => {
    expect(readListBytes(content)).toEqual({ ok: true, encoding, text })
  })

  it.each([
    ['nothing', bytes(), 'empty'],
    ['only blanks', utf8(' \r\n\t'), 'empty'],
    ['zero bytes', bytes(0x41, 0, 0x42), 'binary'],
    ['control characters', bytes(...Array.from({ length: 50 }, (_, at) => at % 20)), 'binary'],
    ['a packed spreadsheet', bytes(0x50, 0x4b, 3, 4, 9, 9), 'spreadsheet'],
    ['an old spreadsheet', bytes(0xd0, 0xcf, 0x11, 0xe0, 1), 'spreadsheet'],
    ['a PDF', utf8('%PDF-1.7 …'), 'pdf'],
    ['too much text', new Uint8Array(MAX_IMPORT_CHARACTERS + 1).fill(0x61), 'tooLarge'],
    ['too many bytes', new Uint8Array(MAX_IMPORT_CHARACTERS * 4 + 1).fill(0x61), 'tooLarge'],
  ])('is not %s', (_name, content, reason) => {
    expect(readListBytes(content)).toEqual({ ok: false, reason })
  })
})
