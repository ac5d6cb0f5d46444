import type { Snapshot } from '@strikeboard/domain/snapshot';
import { orderYd3, slabTakeoff } from '@strikeboard/domain/takeoff';
import { finishes, placingMethods } from '@strikeboard/domain/vocabulary';
import { type FormEvent, useState } from 'react';
import { createPour } from '../../lib/api/schemas/pours.ts';
import { ApiProblem, call } from '../../lib/client/api.ts';
import { Button } from '../ui/Button.tsx';
import { Dialog } from '../ui/Dialog.tsx';
import { Field } from '../ui/Field.tsx';
import type { BoardPatch } from './board-data.ts';
import { finishWords, methodWords, words } from './board-words.ts';
import { numberIn } from './pour-fields.ts';

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
    if (draft.siteId === '') missing.siteId = 'Choose a site.';
    if (draft.name.trim() === '') missing.name = 'Name it, such as "Garage slab".';
    if (areaFt2 === null || !(areaFt2 > 0))
      missing.areaFt2 = 'Give length and width, or the area, as numbers over 0.';
    if (thicknessIn === null || !(thicknessIn > 0)) missing.thicknessIn = 'Give inches over 0, such as 4.';
    if (orderedYd3 === null || !(orderedYd3 > 0))
      missing.orderedYd3 = 'Give yards over 0, or leave it blank to reckon them.';
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
          (thrown.problem.errors ?? []).map(({ field, expected }) => [field, `Expected ${expected}.`]),
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
    <Dialog open={open} onClose={onClose} title={words.newPour}>
      <form onSubmit={(event) => void submit(event)} className="flex flex-col gap-3" noValidate>
        <Field label="Site" error={errors.siteId}>
          {(control) => (
            <select
              {...control}
              className="input"
              value={draft.siteId}
              onChange={(event) => set('siteId', event.target.value)}
            >
              <option value="">Choose…</option>
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
          A new site? <a href={`/${slug}/set-up/sites`}>Add it in set-up</a> first.
        </p>
        <Field label="Name" error={errors.name}>
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
          {number('lengthFt', 'Length, ft')}
          {number('widthFt', 'Width, ft')}
          {number('areaFt2', 'or area, ft²')}
          {number('thicknessIn', 'Thickness, in')}
          {number(
            'orderedYd3',
            'Order, yd³',
            reckoned === null
              ? 'Blank: reckoned'
              : `Blank: ${reckoned}, with ${snapshot.rules.wastePercent} % waste`,
          )}
          <Field label="Wanted on">
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
          <Field label="Finish">
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
          <Field label="Placing">
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
          <Button onClick={onClose}>{words.cancel}</Button>
          <Button type="submit" look="main" busy={busy}>
            Add to the strip
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
