import type { Finding } from '@strikeboard/domain/finding';
import { type FormEvent, useState } from 'react';
import { office } from '../../lib/words/office.en.ts';
import { Button } from '../ui/Button.tsx';
import { Dialog } from '../ui/Dialog.tsx';
import { Field } from '../ui/Field.tsx';
import { FindingList } from './FindingList.tsx';
import type { FindingNames } from './finding-words.ts';

const words = office.drop;

/** What a drop was refused with, or what it needs before it can be done. */
export interface Refusal {
  kind: 'stops' | 'reason-needed';
  visitId: string;
  title: string;
  zone: string;
  findings: readonly Finding[];
  /** Slots that carry no stop, nearest first. */
  nearest: readonly { crewId: string; crewStartMs: number; label: string }[];
  /** Tries again with a reason for every caution. */
  accept: (reason: string) => void;
}

/** Says why a card cannot stand where it was dropped and where it can; or asks for the reason that a caution needs. */
export function DropDialog({
  refusal,
  names,
  onClose,
  onPlace,
}: {
  refusal: Refusal | null;
  names: FindingNames;
  onClose: () => void;
  onPlace: (visitId: string, crewId: string, crewStartMs: number) => void;
}) {
  const [reason, setReason] = useState('');
  const [error, setError] = useState<string | null>(null);
  if (!refusal) return null;
  const stops = refusal.kind === 'stops';
  const close = () => {
    setError(null);
    onClose();
  };
  const submit = (event: FormEvent) => {
    event.preventDefault();
    if (reason.trim() === '') {
      setError(words.reasonMissing);
      return;
    }
    refusal.accept(reason.trim());
    setReason('');
    setError(null);
  };
  return (
    <Dialog
      open
      onClose={close}
      title={stops ? words.cannotStand(refusal.title) : words.needsReason(refusal.title)}
    >
      <FindingList findings={refusal.findings} names={names} zone={refusal.zone} />
      {stops ? (
        <div className="mt-4">
          <h3 className="mb-2 font-semibold">{words.fitsInstead}</h3>
          {refusal.nearest.length === 0 && <p>{words.noFit}</p>}
          <ul className="flex flex-col gap-1.5">
            {refusal.nearest.map((slot) => (
              <li key={`${slot.crewId}-${slot.crewStartMs}`}>
                <Button
                  className="w-full justify-start!"
                  onClick={() => onPlace(refusal.visitId, slot.crewId, slot.crewStartMs)}
                >
                  {slot.label}
                </Button>
              </li>
            ))}
          </ul>
          <div className="mt-4 flex justify-end">
            <Button onClick={close}>{office.cancel}</Button>
          </div>
        </div>
      ) : (
        <form onSubmit={submit} className="mt-4 flex flex-col gap-3">
          <Field label={words.reasonLabel} hint={words.reasonHint} error={error}>
            {(control) => (
              <textarea
                {...control}
                className="input"
                rows={2}
                maxLength={500}
                value={reason}
                onChange={(event) => setReason(event.target.value)}
              />
            )}
          </Field>
          <div className="flex justify-end gap-2">
            <Button onClick={close}>{office.cancel}</Button>
            <Button look="main" type="submit">
              {words.placeAnyway}
            </Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
