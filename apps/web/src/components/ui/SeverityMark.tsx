import type { Severity } from '@strikeboard/domain/finding';

const shapes = {
  stop: 'M5 1h6l4 4v6l-4 4H5l-4-4V5z',
  caution: 'M8 1l7.5 14H.5z',
  note: 'M8 .5a7.5 7.5 0 110 15 7.5 7.5 0 010-15z',
} as const;
const signs = { stop: 'M4.5 8h7', caution: 'M8 6v4.5M8 12v1.6', note: 'M8 7v5M8 3.8v1.6' } as const;
const colours = { stop: 'text-stop', caution: 'text-caution', note: 'text-note' } as const;

/** An icon that differs in shape as well as in colour, with its word (read out even where it is not shown). */
export function SeverityMark({
  severity,
  word,
  hideWord = false,
}: {
  severity: Severity;
  word: string;
  hideWord?: boolean;
}) {
  return (
    <span className={`inline-flex items-center gap-1 font-medium ${colours[severity]}`}>
      <svg aria-hidden="true" width="16" height="16" viewBox="0 0 16 16" className="shrink-0">
        <path d={shapes[severity]} fill="currentColor" />
        <path d={signs[severity]} stroke="var(--sheet)" strokeWidth="1.8" />
      </svg>
      <span className={hideWord ? 'sr-only' : ''}>{word}</span>
    </span>
  );
}
