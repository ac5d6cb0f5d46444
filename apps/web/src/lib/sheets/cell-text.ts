import type { CellValue } from 'exceljs';

/**
 * Text of a workbook cell, as the intake reads it: days as `2026-12-08`, days with a time as `2026-12-08 06:30`, times as
 * `06:30`, percentages as `5%`, formulas by their result. A formula saved without one comes back as `=...`, an error as
 * the sheet shows it (`#REF!`), so that both are refused by name later on.
 */
export function cellText(value: CellValue | undefined, format: string): string {
  if (value === null || value === undefined) return '';
  if (typeof value === 'string') return value;
  if (typeof value === 'number') return numberText(value, format);
  if (typeof value === 'boolean') return value ? 'TRUE' : 'FALSE';
  if (value instanceof Date) return dateText(value);
  if ('richText' in value) return value.richText.map((part) => part.text).join('');
  if ('error' in value) return value.error;
  if ('hyperlink' in value) return cellText(value.text, format);
  const formula = 'formula' in value ? value.formula : value.sharedFormula;
  return value.result === undefined || value.result === null ? `=${formula}` : cellText(value.result, format);
}

/** 15 significant digits, as spreadsheets keep them, so that 0.1 + 0.2 is 0.3; never with an exponent. */
function numberText(value: number, format: string): string {
  if (!Number.isFinite(value)) return '#NUM!';
  const isPercent = format.replace(/"[^"]*"|\\./g, '').includes('%');
  const rounded = Number((isPercent ? value * 100 : value).toPrecision(15));
  const text =
    Math.abs(rounded) < 1e21 && (rounded === 0 || Math.abs(rounded) >= 1e-6)
      ? String(rounded)
      : rounded.toFixed(20).replace(/\.?0+$/, '');
  if (isPercent) return `${text}%`;
  // A format of zeros alone pads: zip codes, job numbers.
  return /^0{2,15}$/.test(format) && /^\d+$/.test(text) ? text.padStart(format.length, '0') : text;
}

/** The workbook's wall-clock value; the library carries it as if it were UTC. */
function dateText(date: Date): string {
  if (Number.isNaN(date.getTime())) return '#NUM!';
  const minutes = new Date(Math.round(date.getTime() / 60_000) * 60_000);
  const [day = '', time = ''] = minutes.toISOString().slice(0, 16).split('T');
  // Day 0 of the 1900 system: a time of day without a day.
  if (day === '1899-12-30' || day === '1899-12-31') return time;
  return time === '00:00' ? day : `${day} ${time}`;
}
