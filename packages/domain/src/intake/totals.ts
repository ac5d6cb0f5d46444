import { type IntakeField, quantityFields } from './fields.ts';
import { type DecimalStyle, plainQuantity, readRatio } from './numbers.ts';
import { add, type Ratio, whole } from './ratio.ts';
import type { SkipReason } from './records.ts';
import { fold, isBlank } from './text.ts';

const TOTALS_WORDS =
  /^(?:(?:grand|sub|sheet|page|week|weekly|month|running|job) )?(?:subtotals?|totals?|total(?:es)?|gran total|sum|suma)(?: (?:yds?|yards?|cy|yd3|yardas|sf|sq ft|ft2|area|pours?|jobs?|loads?|people|rows?|de|of|for|this|week|\d+))*$/;

/** Keeps the running sums of the quantity columns, so that a row that only repeats them is known as totals. */
export interface TotalsWatch {
  readonly mapped: readonly { readonly column: number; readonly field: IntakeField }[];
  readonly style: DecimalStyle;
  readonly sums: Map<number, { sum: Ratio; count: number }>;
}

export function totalsWatch(mapped: TotalsWatch['mapped'], style: DecimalStyle): TotalsWatch {
  return { mapped, style, sums: new Map() };
}

/** Why a row is no data, or null; a data row's quantities are added to the running sums. */
export function skipReasonOf(
  cells: readonly string[],
  headers: readonly string[] | null,
  watch: TotalsWatch,
): SkipReason | null {
  if (cells.every((cell) => fold(cell) === '' && cell.trim() !== '"')) return 'blank';
  if (headers !== null && repeatsHeading(cells, headers)) return 'repeated heading';
  if (saysTotal(cells, watch) || repeatsSums(cells, watch)) return 'totals';
  for (const { column, field } of watch.mapped) {
    const value = quantityFields.has(field) ? quantityIn(cells[column] ?? '', watch.style) : null;
    if (value === null) continue;
    const before = watch.sums.get(column) ?? { sum: whole(0), count: 0 };
    watch.sums.set(column, { sum: add(before.sum, value), count: before.count + 1 });
  }
  return null;
}

function repeatsHeading(cells: readonly string[], headers: readonly string[]): boolean {
  const filled = cells.flatMap((cell, column) => (cell.trim() === '' ? [] : [{ cell, column }]));
  return filled.length >= 2 && filled.every(({ cell, column }) => fold(cell) === fold(headers[column] ?? ''));
}

/** "TOTAL", "Total yds:", "Subtotal", with numbers beside it and no other words. */
function saysTotal(cells: readonly string[], watch: TotalsWatch): boolean {
  const words = cells.filter((cell) => !isBlank(cell) && quantityIn(cell, watch.style) === null);
  return (
    words.length > 0 && words.every((cell) => TOTALS_WORDS.test(fold(cell)) || /^=?sum\(/i.test(cell.trim()))
  );
}

function repeatsSums(cells: readonly string[], watch: TotalsWatch): boolean {
  const filled = cells.flatMap((cell, column) => (isBlank(cell) ? [] : [{ cell, column }]));
  return (
    filled.length > 0 &&
    filled.every(({ cell, column }) => {
      const above = watch.sums.get(column);
      const value = quantityIn(cell, watch.style);
      if (above === undefined || above.count < 2 || value === null) return false;
      return value.n * above.sum.d === above.sum.n * value.d;
    })
  );
}

function quantityIn(cell: string, style: DecimalStyle): Ratio | null {
  const plain = plainQuantity(cell).replace(/ ?(?:"|yds?|yards?|cy|yd3|cu yds?|sf|sq ft|ft2|m3|m2)\.?$/, '');
  return /^[\d.,][\d., ]*$/.test(plain) ? readRatio(plain, style) : null;
}
