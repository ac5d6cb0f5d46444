import { fieldLabel } from '@strikeboard/domain/intake/field-labels';
import { fieldsOf } from '@strikeboard/domain/intake/fields';
import { SURE_CONFIDENCE } from '@strikeboard/domain/intake/headings';
import type { Column, Import } from '../../lib/api/schemas/imports.ts';
import { office } from '../../lib/words/office.en.ts';
import { Badge } from '../ui/Badge.tsx';

const words = office.import;

/** One row per column of the file: its heading, what stands in it, and what it feeds. */
export function Mapping({
  shown,
  busy,
  onMapping,
}: {
  shown: Import;
  busy: boolean;
  onMapping: (mapping: Column[]) => void;
}) {
  const fields = fieldsOf[shown.kind];
  const choose = (column: number, value: string) => {
    const field = fields.find((one) => one === value) ?? null;
    onMapping(shown.mapping.map((one) => (one.column === column ? { ...one, field, confidence: 1 } : one)));
  };
  const unsure = shown.mapping.filter(isUnsure).length;
  return (
    <section className="sheet" aria-label={words.columns}>
      <h3 className="border-b border-line px-4 py-2">
        {words.columns}
        {unsure > 0 && (
          <span className="ml-2 text-sm font-normal text-lumber">{words.columnsToLookAt(unsure)}</span>
        )}
      </h3>
      <div className="overflow-x-auto">
        <table className="table sm:min-w-[40rem]">
          <thead>
            <tr>
              <th scope="col">{words.inTheFile}</th>
              <th scope="col" className="hidden sm:table-cell">
                {words.firstRows}
              </th>
              <th scope="col">{words.is}</th>
            </tr>
          </thead>
          <tbody>
            {shown.mapping.map((one) => (
              <tr key={one.column}>
                <th scope="row">
                  {one.heading || <span className="font-normal text-ink-faint">{words.noHeading}</span>}
                </th>
                <td className="hidden max-w-80 truncate text-ink-soft sm:table-cell">
                  {shown.sample
                    .map((row) => row[one.column] ?? '')
                    .filter((cell) => cell.trim() !== '')
                    .slice(0, 3)
                    .join(' · ')}
                </td>
                <td>
                  <span className="flex flex-wrap items-center gap-2">
                    <select
                      className="input max-w-56"
                      aria-label={words.whatIs(one.heading || words.columnAt(one.column + 1))}
                      value={one.field ?? ''}
                      disabled={busy}
                      onChange={(event) => choose(one.column, event.target.value)}
                    >
                      <option value="">{words.notImported}</option>
                      {fields.map((field) => (
                        <option key={field} value={field}>
                          {fieldLabel(field, 'en')}
                        </option>
                      ))}
                    </select>
                    {isUnsure(one) && <Badge tone="waiting">{words.lookAtIt}</Badge>}
                    {one.unit && <span className="text-sm text-ink-soft">{words.inUnit(one.unit)}</span>}
                  </span>
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </section>
  );
}

function isUnsure(column: Column): boolean {
  return column.field !== null && column.confidence < SURE_CONFIDENCE;
}
