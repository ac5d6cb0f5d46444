import type { Snapshot } from '@strikeboard/domain/snapshot';
import { orderYd3, slabTakeoff } from '@strikeboard/domain/takeoff';
import { finishes, placingMethods } from '@strikeboard/domain/vocabulary';
import { type FormEvent, useState } from 'react';
import { createPour } from '../../lib/api/schemas/pours.ts';
import { ApiProblem, call } from '../../lib/client/api.ts';
import { office } from '../../lib/words/office.en.ts';
import { Button } from '../ui/Button.tsx';
import { Dialog } from '../ui/Dialog.tsx';
import { Field } from '../ui/Field.tsx';
import type { BoardPatch } from './board-data.ts';
import { numberIn } from './pour-fields.ts';

const words = office.newPour;
const { finishes: finishWords, methods: methodWords } = office.terms;

const empty = {
  siteId: '',
  name: '',
  lengthFt: '',
  widthFt: '',
  areaFt2: '',
  thicknessIn: '4',
  orderedYd3: '',
  finish: 'broom',
  placingMethod: 'chute',
  wantedOn: '',
};
type Draft = typeof empty;

/** Area typed, else length by width; null while neither is there. */
function areaOf(draft: Draft): number | null {
  const area = numberIn(draft.areaFt2);
  if (area !== null) return area;
  const length = numberIn(draft.lengthFt);
  const width = numberIn(draft.widthFt);
  return length !== null && width !== null ? length * width : null;
}

/** Yards that the takeoff asks for with waste, in the order's step; null until it can be reckoned. */
export function reckonedYd3(draft: Draft, rules: Snapshot['rules']): number | null {
  const areaFt2 = areaOf(draft);
  const thicknessIn = numberIn(draft.thicknessIn);
  if (areaFt2 === null || thicknessIn === null || !(areaFt2 > 0) || !(thicknessIn > 0)) return null;
  if (!Number.isFinite(areaFt2) || !Number.isFinite(thicknessIn)) return null;
  const { volumeYd3 } = slabTakeoff({
    sections: [{ shape: 'rectangle', lengthFt: areaFt2, widthFt: 1, opening: false }],
    thicknessIn,
  });
  return orderYd3(volumeYd3, rules.wastePercent, rules.orderStepYd3);
}

/** Adds a pour to the waiting strip. */
export function NewPour({
  open,
  slug,
  snapshot,
  onClose,
  onMade,
}: {
  open: boolean;
  slug: string;
  snapshot: Snapshot;
  onClose: () => void;
  onMade: (change: { revision: number; patch: BoardPatch }) => void;
}) {
  const [draft, setDraft] = useState(empty);
  const [errors, setErrors] = useState<Partial<Record<string, string>>>({});
  const [problem, setProblem] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const set = (key: keyof Draft, value: string) => setDraft((last) => ({ ...last, [key]: value }));
  const reckoned = reckonedYd3(draft, snapshot.rules);

  const submit = async (event: FormEvent) => {
    event.preventDefault();
    const areaFt2 = areaOf(draft);
    const thicknessIn = numberIn(draft.thicknessIn);
    const orderedYd3 = numberIn(draft.orderedYd3) ?? reckoned;
    const finish = finishes.find((known) => known === draft.finish);
    const placingMethod = placingMethods.find((known) => known === draft.placingMethod);
    const missing: Partial<Record<string, string>> = {};
    if (draft.siteId === '') missing.siteId = words.siteMissing;
    if (draft.name.trim() === '') missing.name = words.nameMissing;
    if (areaFt2 === null || !(areaFt2 > 0)) missing.areaFt2 = words.areaMissing;
    if (thicknessIn === null || !(thicknessIn > 0)) missing.thicknessIn = words.thicknessMissing;
    // Left blank, it waits for area and thickness, which say themselves what they lack.
    const waits = orderedYd3 === null && ('areaFt2' in missing || 'thicknessIn' in missing);
    if (!waits && (orderedYd3 === null || !(orderedYd3 > 0))) missing.orderedYd3 = words.orderMissing;
    setErrors(missing);
    if (
      Object.keys(missing).length > 0 ||
      areaFt2 === null ||
      thicknessIn === null ||
      orderedYd3 === null ||
      !finish ||
      !placingMethod
    )
      return;
    setBusy(true);
    try {
      onMade(
        await call(createPour, {
          params: { slug },
          body: {
            siteId: draft.siteId,
            name: draft.name.trim(),
            areaFt2,
            thicknessIn,
            orderedYd3,
            finish,
            placingMethod,
            wantedOn: draft.wantedOn || null,
          },
        }),
      );
      setDraft(empty);
      setProblem(null);
    } catch (thrown) {
      if (!(thrown instanceof ApiProblem)) throw thrown;
      setProblem(thrown.problem.detail);
      setErrors(
        Object.fromEntries(
          (thrown.problem.errors ?? []).map(({ field, expected }) => [field, words.expected(expected)]),
        ),
      );
    } finally {
      setBusy(false);
    }
  };

  const number = (key: keyof Draft, label: string, hint?: string) => (
    <Field label={label} hint={hint} error={errors[key]}>
      {(control) => (
        <input
          {...control}
          className="input"
          inputMode="decimal"
          value={draft[key]}
          onChange={(event) => set(key, event.target.value)}
        />
      )}
    </Field>
  );

  return (
    <Dialog open={open} onClose={onClose} title={words.title}>
      <form onSubmit={(event) => void submit(event)} className="flex flex-col gap-3" noValidate>
        <Field label={words.site} error={errors.siteId}>
          {(control) => (
            <select
              {...control}
              className="input"
              value={draft.siteId}
              onChange={(event) => set('siteId', event.target.value)}
            >
              <option value="">{words.choose}</option>
              {[...snapshot.sites]
                .sort((a, b) => a.name.localeCompare(b.name))
                .map((site) => (
                  <option key={site.id} value={site.id}>
                    {site.name}
                  </option>
                ))}
            </select>
          )}
        </Field>
        <p className="-mt-1 text-sm">
          {words.newSite.ask} <a href={`/${slug}/set-up/sites`}>{words.newSite.add}</a> {words.newSite.first}
        </p>
        <Field label={words.name} error={errors.name}>
          {(control) => (
            <input
              {...control}
              className="input"
              maxLength={120}
              value={draft.name}
              onChange={(event) => set('name', event.target.value)}
            />
          )}
        </Field>
        <div className="grid grid-cols-3 gap-3">
          {number('lengthFt', words.length)}
          {number('widthFt', words.width)}
          {number('areaFt2', words.area)}
          {number('thicknessIn', words.thickness)}
          {number(
            'orderedYd3',
            words.order,
            reckoned === null
              ? words.blankReckoned
              : words.blankIsWithWaste(reckoned, snapshot.rules.wastePercent),
          )}
          <Field label={words.wantedOn}>
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
        </div>
        <div className="grid grid-cols-2 gap-3">
          <Field label={words.finish}>
            {(control) => (
              <select
                {...control}
                className="input"
                value={draft.finish}
                onChange={(event) => set('finish', event.target.value)}
              >
                {finishes.map((finish) => (
                  <option key={finish} value={finish}>
                    {finishWords[finish]}
                  </option>
                ))}
              </select>
            )}
          </Field>
          <Field label={words.placing}>
            {(control) => (
              <select
                {...control}
                className="input"
                value={draft.placingMethod}
                onChange={(event) => set('placingMethod', event.target.value)}
              >
                {placingMethods.map((method) => (
                  <option key={method} value={method}>
                    {methodWords[method]}
                  </option>
                ))}
              </select>
            )}
          </Field>
        </div>
        {problem && (
          <p role="alert" className="font-medium text-stop">
            {problem}
          </p>
        )}
        <div className="flex justify-end gap-2">
          <Button onClick={onClose}>{office.cancel}</Button>
          <Button type="submit" look="main" busy={busy}>
            {words.add}
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
