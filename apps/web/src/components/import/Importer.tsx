import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import { useEffect, useRef, useState } from 'react';
import {
  acceptImport,
  type Column,
  discardImport,
  type Import,
  mapImport,
  readImport,
  SHEET_LIMIT_BYTES,
  uploadImport,
} from '../../lib/api/schemas/imports.ts';
import { ApiProblem, call, newKey } from '../../lib/client/api.ts';
import { sheetSentence } from '../../lib/sheets/sheet-problem.ts';
import { office } from '../../lib/words/office.en.ts';
import { Button } from '../ui/Button.tsx';
import { ChooseFile } from './ChooseFile.tsx';
import { Mapping } from './Mapping.tsx';
import { Problems } from './Problems.tsx';
import { Records } from './Records.tsx';

const words = office.import;

/** What can be brought in, in the order in which one needs the other. */
const order: readonly IntakeKind[] = ['people', 'crews', 'sites', 'pours'];

type Step =
  | { name: 'choose' }
  | { name: 'reading'; fileName: string }
  | { name: 'preview'; shown: Import; sheetNames: string[] }
  | { name: 'done'; shown: Import; counts: { created: number; updated: number; unchanged: number } };

/** Brings a spreadsheet in: choose, map the columns, look at what is wrong, accept. Nothing is saved before that. */
export function Importer({ slug, id }: { slug: string; id: string | null }) {
  const [step, setStep] = useState<Step>({ name: 'choose' });
  const [kind, setKind] = useState<IntakeKind>('people');
  const [problem, setProblem] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const file = useRef<File | null>(null);
  // A repeated press, or a try after a lost answer, is the same acceptance.
  const acceptKey = useRef(newKey());

  const run = async (work: () => Promise<void>) => {
    setBusy(true);
    setProblem(null);
    try {
      await work();
    } catch (error) {
      setProblem(error instanceof ApiProblem ? error.message : office.didNotWork);
    } finally {
      setBusy(false);
    }
  };

  const show = (shown: Import, sheetNames: string[]) => {
    setKind(shown.kind);
    setStep({ name: 'preview', shown, sheetNames });
    // The address names the import, so that a reload comes back to it.
    window.history.replaceState(null, '', `?id=${shown.id}`);
  };

  // biome-ignore lint/correctness/useExhaustiveDependencies: once, for the import that the address names.
  useEffect(() => {
    if (id === null) return;
    void run(async () => {
      const shown = await call(readImport, { params: { slug, id } });
      if (shown.state === 'open') show(shown, []);
    });
  }, []);

  const upload = (chosen: File, chosenKind: IntakeKind, sheet?: string) => {
    if (chosen.size > SHEET_LIMIT_BYTES) {
      setProblem(sheetSentence({ code: 'too-big', limitMb: SHEET_LIMIT_BYTES / 1024 / 1024 }, 'en'));
      return;
    }
    file.current = chosen;
    const before = step;
    setStep({ name: 'reading', fileName: chosen.name });
    void run(async () => {
      try {
        const query = { kind: chosenKind, name: chosen.name, ...(sheet === undefined ? {} : { sheet }) };
        const { sheetNames, ...shown } = await call(uploadImport, { params: { slug }, query, bytes: chosen });
        acceptKey.current = newKey();
        show(shown, sheetNames);
      } catch (error) {
        setStep(before.name === 'preview' ? before : { name: 'choose' });
        throw error;
      }
    });
  };

  const remap = (shown: Import, sheetNames: string[], mapping: Column[]) =>
    run(async () => {
      const body = {
        baseVersion: shown.version,
        mapping: mapping.map(({ column, field, unit }) => ({ column, field, unit })),
      };
      show(await call(mapImport, { params: { slug, id: shown.id }, body }), sheetNames);
    });

  const accept = (shown: Import) =>
    run(async () => {
      const counts = await call(acceptImport, {
        params: { slug, id: shown.id },
        body: { baseVersion: shown.version },
        key: acceptKey.current,
      });
      setStep({ name: 'done', shown, counts });
      window.history.replaceState(null, '', window.location.pathname);
    });

  const discard = (shown: Import) =>
    run(async () => {
      await call(discardImport, { params: { slug, id: shown.id } });
      setStep({ name: 'choose' });
      window.history.replaceState(null, '', window.location.pathname);
    });

  return (
    <div className="mt-5 flex flex-col gap-5">
      {problem && (
        <p role="alert" className="border-l-4 border-stop bg-stop-wash px-3 py-2 font-medium text-stop">
          {problem}
        </p>
      )}
      {step.name === 'choose' && (
        <ChooseFile kind={kind} onKind={setKind} order={order} onFile={(chosen) => upload(chosen, kind)} />
      )}
      {step.name === 'reading' && (
        <p role="status" className="sheet p-6">
          {words.reading(step.fileName)}
        </p>
      )}
      {step.name === 'preview' && (
        <Preview
          shown={step.shown}
          busy={busy}
          sheetNames={step.sheetNames}
          onSheet={(sheet) => {
            if (file.current) upload(file.current, step.shown.kind, sheet);
          }}
          onMapping={(mapping) => void remap(step.shown, step.sheetNames, mapping)}
          onAccept={() => void accept(step.shown)}
          onDiscard={() => void discard(step.shown)}
        />
      )}
      {step.name === 'done' && (
        <div className="sheet p-6" role="status">
          <h2 className="text-xl">{words.added(step.shown.kind, step.counts.created)}</h2>
          <p className="mt-1 text-ink-soft">
            {step.counts.updated > 0 && words.wasFilledIn(step.counts.updated)}
            {step.counts.unchanged > 0 && words.leftAsTheyAre(step.counts.unchanged)}
          </p>
          <div className="mt-4 flex flex-wrap gap-2">
            {nextKind(step.shown.kind) !== null && (
              <Button
                look="main"
                onClick={() => {
                  setKind(nextKind(step.shown.kind) ?? 'pours');
                  setStep({ name: 'choose' });
                }}
              >
                {words.next(nextKind(step.shown.kind) ?? 'pours')}
              </Button>
            )}
            <a
              className={`button ${step.shown.kind === 'pours' ? 'button-main' : ''}`}
              href={`/${slug}/board`}
            >
              {words.toBoard}
            </a>
          </div>
        </div>
      )}
    </div>
  );
}

function nextKind(kind: IntakeKind): IntakeKind | null {
  return order[order.indexOf(kind) + 1] ?? null;
}

function Preview(of: {
  shown: Import;
  busy: boolean;
  sheetNames: string[];
  onSheet: (sheet: string) => void;
  onMapping: (mapping: Column[]) => void;
  onAccept: () => void;
  onDiscard: () => void;
}) {
  const { shown, busy, sheetNames } = of;
  const { created, updated, unchanged } = shown.forecast;
  const willDo = [
    words.willBeAdded(shown.kind, created),
    updated > 0 ? words.filledIn(updated) : null,
    unchanged > 0 ? words.hereAlready(unchanged) : null,
  ].filter((part) => part !== null);
  return (
    <>
      <section
        className="sheet flex flex-wrap items-center gap-x-6 gap-y-3 p-4"
        aria-label={words.willHappen}
      >
        <div className="min-w-0 grow">
          <h2 className="text-lg break-words">{shown.fileName}</h2>
          <p className="text-sm text-ink-soft">
            {words.rows(shown.kind, shown.rowCount)}
            {shown.headerLine === null ? words.noHeadings : words.headingsIn(shown.headerLine)}
            {shown.skipped.length > 0 && words.skippedOf(shown.skipped.length)}
          </p>
          <p className="mt-1 font-medium">{willDo.join(', ')}.</p>
          {shown.errorCount > 0 && <p className="font-medium text-stop">{words.keptOut(shown.errorCount)}</p>}
        </div>
        {sheetNames.length > 1 && (
          <label className="flex flex-col gap-1 text-sm font-medium">
            {words.sheet}
            <select
              className="input"
              value={shown.sheetName ?? ''}
              disabled={busy}
              onChange={(event) => of.onSheet(event.target.value)}
            >
              {sheetNames.map((name) => (
                <option key={name}>{name}</option>
              ))}
            </select>
          </label>
        )}
        <div className="flex gap-2">
          <Button onClick={of.onDiscard} disabled={busy}>
            {words.putAside}
          </Button>
          <Button
            look="main"
            busy={busy}
            disabled={created + updated + unchanged === 0}
            onClick={of.onAccept}
          >
            {shown.errorCount > 0
              ? words.acceptOthers(shown.recordCount)
              : words.acceptAll(shown.recordCount)}
          </Button>
        </div>
      </section>
      <Mapping shown={shown} busy={busy} onMapping={of.onMapping} />
      <Problems shown={shown} />
      <Records shown={shown} />
    </>
  );
}
