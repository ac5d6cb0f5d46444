import type { Import } from '../../lib/api/schemas/imports.ts';
import { office } from '../../lib/words/office.en.ts';

const words = office.import;

/** The first records as they were understood, for a last look. */
export function Records({ shown }: { shown: Import }) {
  const columns = [...new Set(shown.records.flatMap(({ cells }) => Object.keys(cells)))];
  if (shown.records.length === 0) return null;
  return (
    <section className="sheet" aria-label={words.asRead}>
      <h3 className="border-b border-line px-4 py-2">
        {words.asRead}
        {shown.recordCount > shown.records.length && (
          <span className="ml-2 text-sm font-normal text-ink-soft">
            {words.firstOf(shown.records.length, shown.recordCount)}
          </span>
        )}
      </h3>
      {/* biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls has to be within reach of the keyboard. */}
      <div className="overflow-x-auto" tabIndex={0}>
        <table className="table text-sm">
          <thead>
            <tr>
              <th scope="col">{words.line}</th>
              {columns.map((column) => (
                <th key={column} scope="col">
                  {column}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {shown.records.map(({ line, cells }) => (
              <tr key={line}>
                <td>{line}</td>
                {columns.map((column) => (
                  <td key={column} className="max-w-64 whitespace-nowrap">
                    <span className="block truncate">{cells[column] ?? ''}</span>
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </section>
  );
}
