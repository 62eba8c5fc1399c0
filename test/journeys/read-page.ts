import type { Page } from 'playwright-core';

/** A quantity of the parameter table with its standard uncertainty, as shown. */
export async function shownQuantity(page: Page, name: string): Promise<{ value: number; u: number }> {
  const row = page.getByRole('table', { name: 'Parameters of the fit' }).getByRole('row', { name });
  const text = (await row.getByRole('cell').first().textContent()) ?? '';
  const [value, u] = text.split('±').map(Number.parseFloat);
  if (value === undefined || u === undefined || Number.isNaN(value))
    throw new Error(`"${text}" is no measured value`);
  return { value, u };
}

/** The texts of the run sheet, row by row. */
export async function runSheetTexts(page: Page): Promise<string[][]> {
  const rows = await page.getByRole('grid', { name: 'Dwells' }).locator('tbody tr').all();
  return Promise.all(rows.map((row) => row.getByRole('gridcell').allTextContents()));
}
