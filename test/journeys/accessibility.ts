import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Page } from 'playwright-core';

const source = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

interface Violation {
  readonly id: string;
  readonly impact: string;
  readonly nodes: readonly { readonly html: string; readonly failureSummary: string }[];
}

/** Serious and critical findings of axe on what the page shows, one line each. */
export async function seriousFindings(page: Page): Promise<string[]> {
  await page.evaluate(source); // outside the page's content policy, which would refuse a script of another origin
  const violations = await page.evaluate<Violation[]>('axe.run().then((found) => found.violations)');
  return violations
    .filter((each) => each.impact === 'serious' || each.impact === 'critical')
    .flatMap((each) =>
      each.nodes.map((node) => `${each.id}: ${node.html.slice(0, 160)} ${node.failureSummary}`),
    );
}
