import type { Import } from '../../lib/api/schemas/imports.ts';
import { SeverityMark } from '../ui/SeverityMark.tsx';

/** Every problem by line and column, with what was expected: errors first. */
export function Problems({ shown }: { shown: Import }) {
  const { problems, errorCount, warningCount, skipped } = shown;
  const unlisted = errorCount + warningCount - problems.length;
  return (
    <section className="sheet" aria-label="To look at">
      <h3 className="border-b border-line px-4 py-2">
        To look at
        <span className="ml-2 text-sm font-normal text-ink-soft">
          {errorCount} {errorCount === 1 ? 'error' : 'errors'}, {warningCount}{' '}
          {warningCount === 1 ? 'warning' : 'warnings'}
        </span>
      </h3>
      {problems.length === 0 && (
        <p className="px-4 py-3 text-ink-soft">Nothing. Every row was read as it stands.</p>
      )}
      {problems.length > 0 && (
        <div className="max-h-[28rem] overflow-auto">
          <table className="table min-w-[44rem]">
            <thead className="sticky top-0 bg-sheet">
              <tr>
                <th scope="col">Line</th>
                <th scope="col">Column</th>
                <th scope="col">Field</th>
                <th scope="col">In the file</th>
                <th scope="col">Expected, or how it was read</th>
              </tr>
            </thead>
            <tbody>
              {problems.map((problem, index) => (
                // biome-ignore lint/suspicious/noArrayIndexKey: one cell may have two problems that say the same.
                <tr key={index}>
                  <td className="whitespace-nowrap">
                    <span className="flex items-center gap-2">
                      <SeverityMark
                        severity={problem.severity === 'error' ? 'stop' : 'caution'}
                        word={problem.severity === 'error' ? 'Error' : 'Warning'}
                        hideWord
                      />
                      {problem.line}
                    </span>
                  </td>
                  <td>{problem.column ?? ''}</td>
                  <td>{problem.field ?? ''}</td>
                  <td className="max-w-52 break-words">{problem.value}</td>
                  <td>{problem.expected}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {unlisted > 0 && <p className="px-4 py-2 text-sm text-ink-soft">And {unlisted} more.</p>}
      {skipped.length > 0 && (
        <details className="border-t border-line px-4 py-2 text-sm">
          <summary className="min-h-8">
            {skipped.length} {skipped.length === 1 ? 'row was' : 'rows were'} skipped
          </summary>
          <ul className="mt-1 columns-2 gap-6 md:columns-4">
            {skipped.slice(0, 200).map(({ line, reason }) => (
              <li key={line}>
                Line {line}: {reason}
              </li>
            ))}
          </ul>
        </details>
      )}
    </section>
  );
}
