import axe from 'axe-core'
import type { Page } from 'playwright-core'

/** What axe-core finds against WCAG 2.2 A and AA and its best practices, in a line each. */
export async function findings(page: Page): Promise<string[]> {
  // Evaluated through the debugger, which the page's policy does not bind.
  await page.evaluate(axe.source)
  return page.evaluate(async () => {
    const axe = (globalThis as unknown as { axe: { run: () => Promise<AxeResults> } }).axe
    const { violations } = await axe.run()
    return violations.flatMap(({ id, nodes }) =>
      nodes.map((node) => `${id}: ${node.target.join(' ')} ${node.failureSummary ?? ''}`)
    )
  })
}

interface AxeResults {
  readonly violations: readonly {
    readonly id: string
    readonly nodes: readonly { readonly target: readonly string[]; readonly failureSummary?: string }[]
  }[]
}
