import type { ReactNode } from 'react';

const tones = {
  plain: 'bg-concrete text-ink',
  waiting: 'bg-lumber-wash text-lumber',
  settled: 'bg-settled-wash text-settled',
  fits: 'bg-fits-wash text-fits',
  note: 'bg-note-wash text-note',
  caution: 'bg-caution-wash text-caution',
  stop: 'bg-stop-wash text-stop',
} as const;
export type Tone = keyof typeof tones;

/** A short word on a wash of its colour; the word carries the meaning, the colour repeats it. */
export function Badge({ tone = 'plain', children }: { tone?: Tone; children: ReactNode }) {
  return (
    <span
      className={`inline-flex items-center gap-1 rounded-card px-1.5 py-0.5 text-[0.8125rem] font-medium leading-tight ${tones[tone]}`}
    >
      {children}
    </span>
  );
}
