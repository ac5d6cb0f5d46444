import { addressOf } from '../api/contract.ts';
import { streamBoard } from '../api/schemas/board.ts';
import { type BoardPatch, boardPatchSchema } from '../api/schemas/snapshot.ts';

/** How the stream stands: `live`, or `broken` while the browser tries to connect again. */
export type StreamState = 'connecting' | 'live' | 'broken';

/**
 * Follows a company's board from a revision on. The browser connects again by itself and goes on where it was.
 * Returns how to stop.
 * @param listener.onReload the stream cannot go on from `since`: read the board anew
 */
export function openBoardStream(
  of: { slug: string; since: number },
  listener: {
    onPatch: (patch: BoardPatch) => void;
    onReload: () => void;
    onState?: (state: StreamState) => void;
  },
): () => void {
  const source = new EventSource(addressOf(streamBoard.path, { slug: of.slug }, { since: of.since }));
  listener.onState?.('connecting');
  source.addEventListener('open', () => listener.onState?.('live'));
  source.addEventListener('error', () => listener.onState?.('broken'));
  source.addEventListener('change', (event) => {
    const patch = boardPatchSchema.safeParse(JSON.parse(event.data));
    if (patch.success) listener.onPatch(patch.data);
    else listener.onReload();
  });
  source.addEventListener('reload', () => {
    source.close();
    listener.onReload();
  });
  return () => source.close();
}
