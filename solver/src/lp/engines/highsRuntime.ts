import type { Highs, InitOptions } from 'highs'

/** How the HiGHS runtime is found. A browser bundle passes `locateFile` with the address of the wasm file. */
export interface HighsSource extends InitOptions {
  /** Replaces the package's own loader, for bundles that bring the runtime another way. */
  load?: (options: InitOptions) => Promise<Highs>
}

let source: HighsSource = {}
let loading: Promise<Highs> | undefined
let loaded: Highs | undefined

/** Says where the runtime comes from; before the first solve. */
export function configureHighs(next: HighsSource): void {
  source = next
  loading = undefined
  loaded = undefined
}

/** Loads the runtime once; a failed load is tried again at the next call. */
export function loadHighs(): Promise<Highs> {
  loading ??= start().catch((error: unknown) => {
    loading = undefined
    throw error
  })
  return loading
}

async function start(): Promise<Highs> {
  const { load, ...options } = source
  loaded = load ? await load(options) : await (await import('highs')).default(options)
  return loaded
}

/** The runtime where it has arrived already: lets a browser answer with the small engine until then. */
export function highsIfLoaded(): Highs | undefined {
  return loaded
}

/** Drops a runtime that has died, so that the next solve starts a fresh one. */
export function forgetHighs(): void {
  loading = undefined
  loaded = undefined
}

/** A short reason from an error of the runtime: its messages can be whole source files. */
export function shortReason(error: unknown): string {
  const text = error instanceof Error ? `${error.name}: ${error.message}` : String(error)
  return text.split('\n')[0]!.slice(0, 160)
}
