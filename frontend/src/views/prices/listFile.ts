import { MAX_IMPORT_CHARACTERS } from '@maslin/shared'

export type ListReading =
  | { readonly ok: true; readonly text: string; readonly encoding: string }
  | { readonly ok: false; readonly reason: 'empty' | 'tooLarge' | 'binary' | 'spreadsheet' | 'pdf' }

/** No encoding we read takes more than four bytes a character. */
const MAX_BYTES = MAX_IMPORT_CHARACTERS * 4

function startsWith(bytes: Uint8Array, ...start: number[]): boolean {
  return start.every((byte, at) => bytes[at] === byte)
}

function decode(bytes: Uint8Array): { text: string; encoding: string } | undefined {
  if (startsWith(bytes, 0xff, 0xfe))
    return { text: new TextDecoder('utf-16le').decode(bytes), encoding: 'UTF-16' }
  if (startsWith(bytes, 0xfe, 0xff))
    return { text: new TextDecoder('utf-16be').decode(bytes), encoding: 'UTF-16' }
  if (bytes.includes(0)) return undefined
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'UTF-8' }
  } catch {
    return { text: new TextDecoder('windows-1252').decode(bytes), encoding: 'Windows-1252' }
  }
}

/** Control characters other than tab, line feed, form feed, carriage return stand in no price list. */
function looksBinary(text: string): boolean {
  let controls = 0
  const sample = text.slice(0, 20_000)
  for (const character of sample) {
    const code = character.codePointAt(0) ?? 0
    if ((code < 32 && ![9, 10, 12, 13].includes(code)) || code === 0xfffd) controls += 1
  }
  return controls > sample.length * 0.005
}

/** Reads the bytes of a dropped file as the text of a price list, or says why they are none. Sends nothing. */
export function readListBytes(bytes: Uint8Array): ListReading {
  if (bytes.length === 0) return { ok: false, reason: 'empty' }
  if (bytes.length > MAX_BYTES) return { ok: false, reason: 'tooLarge' }
  if (startsWith(bytes, 0x50, 0x4b, 0x03, 0x04) || startsWith(bytes, 0xd0, 0xcf, 0x11, 0xe0)) {
    return { ok: false, reason: 'spreadsheet' }
  }
  if (startsWith(bytes, 0x25, 0x50, 0x44, 0x46)) return { ok: false, reason: 'pdf' }
  const decoded = decode(bytes)
  if (!decoded || looksBinary(decoded.text)) return { ok: false, reason: 'binary' }
  const text = decoded.text.replace(/^\ufeff/, '')
  if (!text.trim()) return { ok: false, reason: 'empty' }
  if (text.length > MAX_IMPORT_CHARACTERS) return { ok: false, reason: 'tooLarge' }
  return { ok: true, text, encoding: decoded.encoding }
}
