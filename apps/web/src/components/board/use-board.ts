import type { Snapshot } from '@strikeboard/domain/snapshot';
import { keepPreviousData, useQuery, useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useState } from 'react';
import { readBoard } from '../../lib/api/schemas/board.ts';
import { call } from '../../lib/client/api.ts';
import { openBoardStream, type StreamState } from '../../lib/client/board-stream.ts';
import { type BoardPatch, follows, mergePatch } from './board-data.ts';

/** Reads the board of some days and keeps it true over the stream. */
export function useBoard(slug: string, from: string, days: number) {
  const client = useQueryClient();
  const [stream, setStream] = useState<StreamState>('connecting');
  const [opened, setOpened] = useState(0);
  const query = useQuery({
    queryKey: ['board', slug, from, days],
    queryFn: ({ signal }): Promise<Snapshot> =>
      call(readBoard, { params: { slug }, query: { from, days }, signal }),
    staleTime: Number.POSITIVE_INFINITY,
    placeholderData: keepPreviousData,
  });

  /** Puts a change into every range that was read. */
  const apply = useCallback(
    (patch: BoardPatch) => {
      for (const [key, snapshot] of client.getQueriesData<Snapshot>({ queryKey: ['board', slug] })) {
        if (!snapshot) continue;
        // A change of crews, sites or people has no rows in a patch.
        if (patch.kind !== 'set-up' && follows(snapshot, patch))
          client.setQueryData(key, mergePatch(snapshot, patch));
        else void client.invalidateQueries({ queryKey: key });
      }
    },
    [client, slug],
  );

  /** Shows a snapshot of one's own making until the server has answered. */
  const show = useCallback(
    (snapshot: Snapshot) => client.setQueryData(['board', slug, from, days], snapshot),
    [client, slug, from, days],
  );

  const reload = useCallback(() => client.invalidateQueries({ queryKey: ['board', slug] }), [client, slug]);

  const revision = query.data?.revision;
  const started = revision !== undefined;
  // biome-ignore lint/correctness/useExhaustiveDependencies: it goes on by itself from the first revision that was read.
  useEffect(() => {
    if (revision === undefined) return;
    return openBoardStream(
      { slug, since: revision },
      {
        onPatch: apply,
        onReload: () => void reload().then(() => setOpened((count) => count + 1)),
        onState: setStream,
      },
    );
  }, [slug, started, opened, apply, reload]);

  return {
    snapshot: query.data,
    error: query.error,
    loading: query.isPlaceholderData,
    stream,
    apply,
    show,
    reload,
  };
}
