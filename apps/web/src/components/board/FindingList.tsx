import type { Finding } from '@strikeboard/domain/finding';
import { office } from '../../lib/words/office.en.ts';
import { SeverityMark } from '../ui/SeverityMark.tsx';
import { type FindingNames, findingWords } from './finding-words.ts';

const words = office.finding;

/** "14 more people, or another crew": each after the first goes on in the same sentence. */
function joinedClears(clears: readonly string[]): string {
  return clears
    .map((one, at) => (at === 0 ? one : one.charAt(0).toLowerCase() + one.slice(1)))
    .join(words.orElse);
}

/** Findings with what, why and what would clear them; each opens to its numbers, formula and source. */
export function FindingList({
  findings,
  names,
  zone,
}: {
  findings: readonly Finding[];
  names: FindingNames;
  zone: string;
}) {
  return (
    <ul className="flex flex-col gap-2">
      {findings.map((finding, at) => {
        const said = findingWords(finding, names, zone);
        return (
          // biome-ignore lint/suspicious/noArrayIndexKey: a code can come twice, and the list is never reordered in place.
          <li key={`${finding.code}-${at}`} className="rounded-card border border-line bg-paper px-3 py-2">
            <div className="flex gap-2">
              <SeverityMark severity={finding.severity} word={office.terms.severities[finding.severity]} />
              <p className="font-medium">{said.what}</p>
            </div>
            {said.why && <p className="mt-1 text-sm text-ink-soft">{said.why}</p>}
            {said.clears.length > 0 && (
              <p className="mt-1 text-sm">
                <span className="font-medium">{words.clearsIt} </span>
                {joinedClears(said.clears)}.
              </p>
            )}
            <details className="mt-1 text-sm">
              <summary className="text-ink-soft">{words.reckoned}</summary>
              {finding.formula && <p className="mt-1 font-medium">{finding.formula}</p>}
              <dl className="mt-1 grid grid-cols-[1fr_auto] gap-x-3 gap-y-0.5">
                {said.numbers.map(({ label, value }) => (
                  <div key={label} className="contents">
                    <dt className="text-ink-soft">{label}</dt>
                    <dd className="text-right">{value}</dd>
                  </div>
                ))}
              </dl>
              <p className="mt-1 text-ink-soft">
                {finding.source.title} ({finding.source.status})
              </p>
            </details>
          </li>
        );
      })}
    </ul>
  );
}
