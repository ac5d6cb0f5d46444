import { type ReactNode, useEffect, useId, useRef } from 'react';
import { office } from '../../lib/words/office.en.ts';

/**
 * A modal dialog on the browser's own element, which keeps the focus inside and gives it back. Escape and a press
 * beside it close it. `side` stands at the right edge, full height, as the board's panel does.
 */
export function Dialog({
  open,
  onClose,
  title,
  side = false,
  children,
  footer,
}: {
  open: boolean;
  onClose: () => void;
  title: string;
  side?: boolean;
  children: ReactNode;
  footer?: ReactNode;
}) {
  const ref = useRef<HTMLDialogElement>(null);
  const titleId = useId();
  useEffect(() => {
    const dialog = ref.current;
    if (!dialog) return;
    if (open && !dialog.open) dialog.showModal();
    if (!open && dialog.open) dialog.close();
  }, [open]);
  const place = side
    ? 'ml-auto mr-0 my-0 h-dvh max-h-dvh w-[min(30rem,100vw)] max-w-none'
    : 'm-auto max-h-[90dvh] w-[min(34rem,calc(100vw-1.5rem))]';
  return (
    // biome-ignore lint/a11y/useKeyWithClickEvents: Escape closes it, which the browser does by itself.
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      className={`${place} border border-line-strong bg-sheet p-0 text-ink shadow-lift`}
      onClose={onClose}
      onClick={(event) => {
        if (event.target === ref.current) onClose();
      }}
    >
      {open && (
        <div className="flex max-h-[inherit] flex-col">
          <header className="flex items-start justify-between gap-3 border-b border-line px-4 py-3">
            <h2 id={titleId} className="text-lg">
              {title}
            </h2>
            <button
              type="button"
              className="button button-quiet -mr-2 -mt-1"
              onClick={onClose}
              aria-label={office.close}
            >
              <svg
                aria-hidden="true"
                width="16"
                height="16"
                viewBox="0 0 16 16"
                stroke="currentColor"
                strokeWidth="2"
              >
                <path d="M3 3l10 10M13 3L3 13" />
              </svg>
            </button>
          </header>
          <div className="grow overflow-y-auto px-4 py-4">{children}</div>
          {footer && (
            <footer className="flex flex-wrap justify-end gap-2 border-t border-line px-4 py-3">
              {footer}
            </footer>
          )}
        </div>
      )}
    </dialog>
  );
}
