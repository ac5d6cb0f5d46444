import { type Child, failureOf } from './children.ts';

/** What has been started so far, to be ended in order, and word of a part that ends by itself. */
export type Lifecycle = {
  /** Runs at close, the last registered first, after all children have ended. */
  onClose(end: () => Promise<unknown>): void;
  /** A child to be ended at close. */
  own(child: Child): void;
  /** From now on, this child ending by itself is a failure. */
  watch(child: Child): void;
  /** Ends a child on purpose. */
  release(child: Child, graceMs: number): Promise<void>;
  isClosing(): boolean;
  fail(sentence: string): void;
  /** Resolves with a sentence when a part has ended by itself. */
  failed: Promise<string>;
  close(): Promise<void>;
};

export function createLifecycle(): Lifecycle {
  const children = new Set<Child>();
  const ends: (() => Promise<unknown>)[] = [];
  let closing: Promise<void> | undefined;
  let fail: (sentence: string) => void = () => {};
  const failed = new Promise<string>((resolve) => {
    fail = resolve;
  });

  async function endAll(): Promise<void> {
    await Promise.all([...children].map((child) => child.end()));
    children.clear();
    while (ends.length > 0) await ends.pop()?.();
  }

  return {
    onClose: (end) => ends.push(end),
    own: (child) => children.add(child),
    watch: (child) => {
      void child.ended.then((how) => {
        if (closing === undefined && children.has(child)) fail(failureOf(child, how));
      });
    },
    release: async (child, graceMs) => {
      children.delete(child);
      await child.end(graceMs);
    },
    isClosing: () => closing !== undefined,
    fail,
    failed,
    // A second call waits for the first and ends what was started meanwhile.
    close: () => {
      closing = (closing ?? Promise.resolve()).then(endAll);
      return closing;
    },
  };
}
