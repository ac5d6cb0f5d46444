import { useSyncExternalStore } from 'react';
import { office } from '../../lib/words/office.en.ts';
import { Button } from './Button.tsx';

/** A short message at the foot of the screen, read out as it appears. */
export interface Toast {
  id: number;
  text: string;
  tone: 'plain' | 'stop';
  /** A way back, such as Undo. */
  action?: { label: string; run: () => void };
}

const SHOWN_MS = 8_000;
const none: readonly Toast[] = [];
let toasts: readonly Toast[] = none;
let lastId = 0;
const listeners = new Set<() => void>();

function publish(next: readonly Toast[]): void {
  toasts = next;
  for (const listener of listeners) listener();
}

/** Shows a message. Refusals stay until they are put away; others go by themselves. Returns its id. */
export function showToast(
  text: string,
  options: { tone?: Toast['tone']; action?: Toast['action'] } = {},
): number {
  lastId += 1;
  const id = lastId;
  const tone = options.tone ?? 'plain';
  publish([...toasts.slice(-3), { id, text, tone, action: options.action }]);
  if (tone === 'plain') setTimeout(() => dismissToast(id), SHOWN_MS);
  return id;
}

export function dismissToast(id: number): void {
  if (toasts.some((toast) => toast.id === id)) publish(toasts.filter((toast) => toast.id !== id));
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** Where messages appear; one per page, inside any island. */
export function Toasts() {
  const shown = useSyncExternalStore(
    subscribe,
    () => toasts,
    () => none,
  );
  return (
    <div
      role="status"
      aria-live="polite"
      className="no-print pointer-events-none fixed inset-x-0 bottom-0 z-50 flex flex-col items-center gap-2 p-3"
    >
      {shown.map((toast) => (
        <div
          key={toast.id}
          className={`pointer-events-auto flex w-[min(40rem,100%)] items-center gap-3 rounded-card border px-3 py-2 shadow-lift ${
            toast.tone === 'stop' ? 'border-stop bg-stop-wash text-stop' : 'border-line-strong bg-sheet'
          }`}
        >
          <p className="grow">{toast.text}</p>
          {toast.action && (
            <Button
              onClick={() => {
                toast.action?.run();
                dismissToast(toast.id);
              }}
            >
              {toast.action.label}
            </Button>
          )}
          <button
            type="button"
            className="button button-quiet px-2"
            aria-label={office.close}
            onClick={() => dismissToast(toast.id)}
          >
            <svg
              aria-hidden="true"
              width="14"
              height="14"
              viewBox="0 0 16 16"
              stroke="currentColor"
              strokeWidth="2"
            >
              <path d="M3 3l10 10M13 3L3 13" />
            </svg>
          </button>
        </div>
      ))}
    </div>
  );
}
