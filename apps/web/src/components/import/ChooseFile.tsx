import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import { useState } from 'react';
import { office } from '../../lib/words/office.en.ts';

const words = office.import;

/** Kind and file, by choosing or by dropping. */
export function ChooseFile({
  kind,
  onKind,
  order,
  onFile,
}: {
  kind: IntakeKind;
  onKind: (kind: IntakeKind) => void;
  order: readonly IntakeKind[];
  onFile: (file: File) => void;
}) {
  const [isOver, setIsOver] = useState(false);
  const take = (files: FileList | null) => {
    const [file] = files ?? [];
    if (file) onFile(file);
  };
  return (
    <section className="sheet p-5">
      <fieldset>
        <legend className="font-semibold">{words.whatIsInIt}</legend>
        <div className="mt-2 grid gap-2 sm:grid-cols-2 lg:grid-cols-4">
          {order.map((one, index) => (
            <label
              key={one}
              className={`flex min-h-tap cursor-pointer items-start gap-2 border px-3 py-2 ${
                one === kind ? 'border-settled bg-settled-wash' : 'border-line-strong'
              }`}
            >
              <input
                type="radio"
                name="kind"
                className="mt-1 size-4 accent-settled"
                checked={one === kind}
                onChange={() => onKind(one)}
              />
              <span>
                <span className="font-medium">
                  {index + 1}. {words.kinds[one].Many}
                </span>
                <span className="block text-sm text-ink-soft">{words.kinds[one].columns}</span>
              </span>
            </label>
          ))}
        </div>
      </fieldset>
      {/* biome-ignore lint/a11y/noStaticElementInteractions: dropping is a second way; the button inside does the same. */}
      <div
        className={`mt-4 flex flex-col items-center gap-3 border-2 border-dashed px-4 py-8 text-center ${
          isOver ? 'border-settled bg-settled-wash' : 'border-line-strong'
        }`}
        onDragOver={(event) => {
          event.preventDefault();
          setIsOver(true);
        }}
        onDragLeave={() => setIsOver(false)}
        onDrop={(event) => {
          event.preventDefault();
          setIsOver(false);
          take(event.dataTransfer.files);
        }}
      >
        <label className="button button-main focus-within:outline-3 focus-within:outline-focus">
          {words.chooseFile}
          <input
            type="file"
            className="sr-only"
            accept=".csv,.xlsx,.txt,text/csv,application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
            onChange={(event) => take(event.target.files)}
          />
        </label>
        <p className="text-sm text-ink-soft">{words.dropHint}</p>
      </div>
    </section>
  );
}
