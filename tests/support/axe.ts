import type { AxeResults, RunOptions } from 'axe-core'
import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import type { Page } from 'playwright-core'

const source = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8')

/** One rule of WCAG that a page breaks, and where. */
export interface Violation {
  /** axe's name of the rule. */
  rule: string
  help: string
  /** CSS selectors of the elements, with what is wrong with each. */
  where: string[]
}

/**
 * Checks a page as it stands against WCAG 2.2, levels A and AA.
 * The source is evaluated, not added as a script tag, which the content security policy would refuse.
 * @param within CSS selector of the part to check; the whole page by default
 */
export async function accessibilityViolations(page: Page, within?: string): Promise<Violation[]> {
  if (!(await page.evaluate(() => 'axe' in window))) await page.evaluate(source)
  const options: RunOptions = {
    runOnly: { type: 'tag', values: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] },
    resultTypes: ['violations'],
  }
  const results: AxeResults = await page.evaluate(
    ([context, run]) => window.axe.run(context ?? document, run),
    [within, options] as const,
  )
  return results.violations.map(({ id, help, nodes }) => ({
    rule: id,
    help,
    where: nodes.map((node) => `${node.target.join(' ')}: ${node.failureSummary ?? node.html}`),
  }))
}

declare global {
  interface Window {
    axe: typeof import('axe-core')
  }
}
