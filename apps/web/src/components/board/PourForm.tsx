import type { Finding } from '@strikeboard/domain/finding';
import type { Pour, Snapshot, Visit } from '@strikeboard/domain/snapshot';
import { finishes, jointings, placingMethods } from '@strikeboard/domain/vocabulary';
import { type FormEvent, useState } from 'react';
import { editPour } from '../../lib/api/schemas/pours.ts';
import { ApiProblem, call } from '../../lib/client/api.ts';
import { office } from '../../lib/words/office.en.ts';
import { Button } from '../ui/Button.tsx';
import { Field } from '../ui/Field.tsx';
import type { BoardPatch } from './board-data.ts';
import { FindingList } from './FindingList.tsx';
import type { FindingNames } from './finding-words.ts';
import { changesIn, draftOf, notNumbers, type PourDraft } from './pour-fields.ts';

const words = office.pourForm;
const { terms } = office;

/** Edits a pour. What was typed stays when the server refuses; what it minds stands at the field. */
export function PourForm({
  slug,
  pour,
  visit,
  snapshot,
  names,
  zone,
  onSaved,
}: {
  slug: string;
  pour: Pour;
  visit: Visit;
  snapshot: Snapshot;
  names: FindingNames;
  zone: string;
  onSaved: (change: { revision: number; patch: BoardPatch }) => void;
}) {
  const [before, setBefore] = useState(() => ({ draft: draftOf(pour, visit), version: pour.version }));
  const [draft, setDraft] = useState(before.draft);
  const [problem, setProblem] = useState<ApiProblem | null>(null);
  const [reason, setReason] = useState('');
  const [newItem, setNewItem] = useState('');
  const [busy, setBusy] = useState(false);
  const changes = changesIn(draft, before.draft);
  const dirty = Object.keys(changes).length > 0;
  const asked: readonly Finding[] =
    problem?.problem.code === 'reason-needed'
      ? (problem.problem.findings ?? []).filter((finding) => finding.severity === 'caution')
      : [];
  const refused: readonly Finding[] =
    problem?.problem.code === 'stops'
      ? (problem.problem.findings ?? []).filter((finding) => finding.severity === 'stop')
      : [];
  const stale = problem?.problem.code === 'stale-version';

  const set = <Key extends keyof PourDraft>(key: Key, value: PourDraft[Key]) =>
    setDraft((last) => ({ ...last, [key]: value }));
  const [typedWrong, setTypedWrong] = useState<Partial<Record<string, string>>>({});
  const error = (field: string) => {
    const typed = typedWrong[field];
    if (typed) return typed;
    const expected = problem?.expected(field);
    return expected ? words.expected(expected) : null;
  };

  const save = async (event: FormEvent) => {
    event.preventDefault();
    const wrong = notNumbers(draft);
    setTypedWrong(wrong);
    if (Object.keys(wrong).length > 0) return;
    setBusy(true);
    try {
      const change = await call(editPour, {
        params: { slug, id: pour.id },
        body: {
          ...changes,
          baseVersion: before.version,
          reasons: Object.fromEntries(
            asked.map((finding) => [finding.code, reason.trim()]).filter(([, text]) => text !== ''),
          ),
        },
      });
      setProblem(null);
      setReason('');
      const saved = change.patch.pours.find((row) => row.id === pour.id);
      const savedVisit = change.patch.visits.find((row) => row.id === visit.id) ?? visit;
      if (saved) {
        setBefore({ draft: draftOf(saved, savedVisit), version: saved.version });
        setDraft(draftOf(saved, savedVisit));
      }
      onSaved(change);
    } catch (thrown) {
      if (!(thrown instanceof ApiProblem)) throw thrown;
      setProblem(thrown);
    } finally {
      setBusy(false);
    }
  };

  const number = (key: keyof PourDraft & string, label: string, hint?: string) => (
    <Field label={label} hint={hint} error={error(key)}>
      {(control) => (
        <input
          {...control}
          className="input"
          inputMode="decimal"
          value={String(draft[key])}
          onChange={(event) => set(key, event.target.value)}
        />
      )}
    </Field>
  );
  const choice = (
    key: 'finish' | 'placingMethod' | 'jointing',
    label: string,
    options: readonly string[],
    said: Record<string, string>,
  ) => (
    <Field label={label} error={error(key)}>
      {(control) => (
        <select
          {...control}
          className="input"
          value={draft[key]}
          onChange={(event) => set(key, event.target.value)}
        >
          {options.map((option) => (
            <option key={option} value={option}>
              {said[option]}
            </option>
          ))}
        </select>
      )}
    </Field>
  );

  return (
    <form onSubmit={(event) => void save(event)} className="flex flex-col gap-3">
      <Field label={words.name} error={error('name')}>
        {(control) => (
          <input
            {...control}
            className="input"
            value={draft.name}
            onChange={(event) => set('name', event.target.value)}
          />
        )}
      </Field>
      <div className="grid grid-cols-2 gap-3">
        {number('orderedYd3', words.ordered)}
        {number(
          'placingRateYd3PerHour',
          words.placingRate,
          words.blankIs(snapshot.rules.placingRateYd3PerHour),
        )}
        {choice('finish', words.finish, finishes, terms.finishes)}
        {choice('placingMethod', words.placing, placingMethods, terms.methods)}
        <Field label={words.mix} error={error('mixId')}>
          {(control) => (
            <select
              {...control}
              className="input"
              value={draft.mixId}
              onChange={(event) => set('mixId', event.target.value)}
            >
              <option value="">{words.notChosen}</option>
              {snapshot.mixes.map((mix) => (
                <option key={mix.id} value={mix.id}>
                  {mix.code} · {names('plant', mix.plantId)}
                </option>
              ))}
            </select>
          )}
        </Field>
        <Field label={words.pump} error={error('pumpId')}>
          {(control) => (
            <select
              {...control}
              className="input"
              value={draft.pumpId}
              onChange={(event) => set('pumpId', event.target.value)}
            >
              <option value="">{words.anyPump}</option>
              {snapshot.equipment
                .filter((piece) => piece.kind === 'pump')
                .map((piece) => (
                  <option key={piece.id} value={piece.id}>
                    {piece.name}
                  </option>
                ))}
            </select>
          )}
        </Field>
        {number('peopleToPlace', words.peopleToPlace, words.blankReckoned)}
        {number('peopleToFinish', words.peopleToFinish, words.blankReckoned)}
        {number('concreteTempF', words.concreteTemp, words.blankIs(snapshot.rules.concreteTempF))}
        {choice('jointing', words.joints, jointings, terms.jointings)}
        <Field label={words.wantedOn} error={error('wantedOn')}>
          {(control) => (
            <input
              {...control}
              type="date"
              className="input"
              value={draft.wantedOn}
              onChange={(event) => set('wantedOn', event.target.value)}
            />
          )}
        </Field>
        <label className="flex items-center gap-2 self-end pb-2">
          <input
            type="checkbox"
            className="size-5"
            checked={draft.willCall}
            onChange={(event) => set('willCall', event.target.checked)}
          />
          {words.willCall}
        </label>
      </div>
      <fieldset className="flex flex-col gap-1">
        <legend className="text-sm font-medium">{words.ready}</legend>
        {draft.readiness.map((entry) => (
          <label key={entry.item} className="flex min-h-9 items-center gap-2">
            <input
              type="checkbox"
              className="size-5"
              checked={entry.done}
              onChange={(event) =>
                set(
                  'readiness',
                  draft.readiness.map((row) =>
                    row === entry ? { ...row, done: event.target.checked } : row,
                  ),
                )
              }
            />
            {entry.item}
          </label>
        ))}
        <div className="flex gap-2">
          <input
            aria-label={words.readyItem}
            placeholder={words.readyExample}
            className="input"
            value={newItem}
            maxLength={80}
            onChange={(event) => setNewItem(event.target.value)}
          />
          <Button
            disabled={newItem.trim() === '' || draft.readiness.some((row) => row.item === newItem.trim())}
            onClick={() => {
              set('readiness', [...draft.readiness, { item: newItem.trim(), done: false }]);
              setNewItem('');
            }}
          >
            {words.add}
          </Button>
        </div>
      </fieldset>
      <Field label={words.notes} error={error('notes')}>
        {(control) => (
          <textarea
            {...control}
            className="input"
            rows={2}
            value={draft.notes}
            onChange={(event) => set('notes', event.target.value)}
          />
        )}
      </Field>
      {problem && (
        <div role="alert" className="flex flex-col gap-2 rounded-card border border-stop bg-stop-wash p-3">
          <p className="font-medium text-stop">{problem.problem.detail}</p>
          {stale && (
            <div className="flex flex-wrap items-center gap-2">
              {problem.problem.changed && <p>{words.changedMeanwhile(problem.problem.changed)}</p>}
              <Button
                onClick={() => {
                  // What was typed stays; only what it is compared with becomes today's.
                  setBefore({ draft: draftOf(pour, visit), version: pour.version });
                  setProblem(null);
                }}
              >
                {words.keepMine}
              </Button>
              <Button
                onClick={() => {
                  setBefore({ draft: draftOf(pour, visit), version: pour.version });
                  setDraft(draftOf(pour, visit));
                  setProblem(null);
                }}
              >
                {words.takeTheirs}
              </Button>
            </div>
          )}
          <FindingList findings={[...refused, ...asked]} names={names} zone={zone} />
          {asked.length > 0 && (
            <Field label={words.reason} error={null}>
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
          )}
        </div>
      )}
      <div className="sticky bottom-0 flex justify-end gap-2 bg-sheet py-2">
        <Button disabled={!dirty || busy} onClick={() => setDraft(before.draft)}>
          {words.undoTyping}
        </Button>
        <Button type="submit" look="main" busy={busy} disabled={!dirty}>
          {office.save}
        </Button>
      </div>
    </form>
  );
}
