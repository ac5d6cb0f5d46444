import type { Import } from '../../lib/api/schemas/imports.ts';
import { office } from '../../lib/words/office.en.ts';
import { SeverityMark } from '../ui/SeverityMark.tsx';

const words = office.import;

/** Every problem by line and column, with what was expected: errors first. */
export function Problems({ shown }: { shown: Import }) {
  const { problems, errorCount, warningCount, skipped } = shown;
  const unlisted = errorCount + warningCount - problems.length;
  return (
    <section className="sheet" aria-label={words.toLookAt}>
      <h3 className="border-b border-line px-4 py-2">
        {words.toLookAt}
        <span className="ml-2 text-sm font-normal text-ink-soft">
          {words.counts(errorCount, warningCount)}
        </span>
      </h3>
      {problems.length === 0 && <p className="px-4 py-3 text-ink-soft">{words.nothingWrong}</p>}
      {problems.length > 0 && (
        // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls has to be within reach of the keyboard.
        <div className="max-h-[28rem] overflow-auto" tabIndex={0}>
          <table className="table min-w-[44rem]">
            <thead className="sticky top-0 bg-sheet">
              <tr>
                <th scope="col">{words.line}</th>
                <th scope="col">{words.column}</th>
                <th scope="col">{words.field}</th>
                <th scope="col">{words.inTheFile}</th>
                <th scope="col">{words.expected}</th>
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
                        word={problem.severity === 'error' ? words.error : words.warning}
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
      {unlisted > 0 && <p className="px-4 py-2 text-sm text-ink-soft">{words.andMore(unlisted)}</p>}
      {skipped.length > 0 && (
        <details className="border-t border-line px-4 py-2 text-sm">
          <summary className="min-h-8">{words.rowsSkipped(skipped.length)}</summary>
          <ul className="mt-1 columns-2 gap-6 md:columns-4">
            {skipped.slice(0, 200).map(({ line, reason }) => (
              <li key={line}>{words.skippedLine(line, reason)}</li>
            ))}
          </ul>
        </details>
      )}
    </section>
  );
}
