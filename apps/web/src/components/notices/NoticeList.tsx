import type { NoticeState } from '@strikeboard/domain/vocabulary';
import { noticeStates } from '@strikeboard/domain/vocabulary';
import { formatClock, formatDay, siteDayOf } from '@strikeboard/domain/zone';
import { useInfiniteQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { listNotices, type NoticeView } from '../../lib/api/schemas/notices.ts';
import { ApiProblem, call } from '../../lib/client/api.ts';
import { queryClient } from '../../lib/client/query-client.ts';
import { office } from '../../lib/words/office.en.ts';
import { Badge, type Tone } from '../ui/Badge.tsx';
import { Button } from '../ui/Button.tsx';

const words = office.notices;
const REFRESH_MS = 5_000;

const tones: Record<NoticeState, Tone> = {
  queued: 'waiting',
  sending: 'waiting',
  sent: 'settled',
  delivered: 'fits',
  failed: 'stop',
  unsure: 'caution',
};

/** All notices, newest first, with the words exactly as sent. Looks for news by itself. */
export function NoticeList({ slug, zone }: { slug: string; zone: string }) {
  const [state, setState] = useState<NoticeState | null>(null);
  const list = useInfiniteQuery(
    {
      queryKey: ['notices', slug, state],
      queryFn: ({ pageParam, signal }) =>
        call(listNotices, {
          params: { slug },
          query: { ...(pageParam === '' ? {} : { before: pageParam }), ...(state === null ? {} : { state }) },
          signal,
        }),
      initialPageParam: '',
      getNextPageParam: (last) => (last.hasMore ? last.notices.at(-1)?.id : undefined),
      refetchInterval: REFRESH_MS,
    },
    queryClient(),
  );
  const notices = list.data?.pages.flatMap((page) => page.notices) ?? [];
  return (
    <>
      <div className="mt-4 flex flex-wrap items-center gap-2">
        <fieldset className="flex flex-wrap gap-1">
          <legend className="sr-only">{words.state}</legend>
          {[null, ...noticeStates].map((one) => (
            <Button
              key={one ?? 'all'}
              look={one === state ? 'main' : 'plain'}
              aria-pressed={one === state}
              onClick={() => setState(one)}
            >
              {one === null ? words.all : words.states[one]}
            </Button>
          ))}
        </fieldset>
        <Button className="ml-auto" busy={list.isRefetching} onClick={() => void list.refetch()}>
          {words.refresh}
        </Button>
      </div>
      {list.error && (
        <p role="alert" className="mt-4 bg-stop-wash px-3 py-2 text-stop">
          {list.error instanceof ApiProblem ? list.error.message : words.failed}
        </p>
      )}
      {list.isPending && <p className="mt-6 text-ink-soft">{words.loading}</p>}
      {list.isSuccess && notices.length === 0 && (
        <p className="sheet mt-6 p-6 text-ink-soft">
          {state === null ? words.nothingYet : words.noneOf(words.states[state])}
        </p>
      )}
      <ul className="mt-4 flex flex-col gap-2">
        {notices.map((notice) => (
          <Notice key={notice.id} notice={notice} zone={zone} />
        ))}
      </ul>
      {list.hasNextPage && (
        <Button className="mt-4" busy={list.isFetchingNextPage} onClick={() => void list.fetchNextPage()}>
          {words.showOlder}
        </Button>
      )}
    </>
  );
}

function Notice({ notice, zone }: { notice: NoticeView; zone: string }) {
  const at = (ms: number) => `${formatDay(siteDayOf(ms, zone), 'en')}, ${formatClock(ms, zone, 'en')}`;
  return (
    <li className="sheet grid gap-x-6 gap-y-2 p-3 md:grid-cols-[15rem_1fr]">
      <div>
        <p className="flex flex-wrap items-center gap-2">
          <span className="font-semibold">{notice.personName}</span>
          <Badge tone={tones[notice.state]}>{words.states[notice.state]}</Badge>
        </p>
        <p className="text-sm text-ink-soft">{words.wayTo(notice.channel, notice.toAddress)}</p>
        <p className="mt-1 text-sm">{notice.visitTitle}</p>
        <dl className="mt-1 grid grid-cols-[auto_1fr] gap-x-2 text-sm text-ink-soft">
          <dt>{words.states.queued}</dt>
          <dd>{at(notice.queuedMs)}</dd>
          {notice.sentMs !== null && (
            <>
              <dt>{words.states.sent}</dt>
              <dd>{at(notice.sentMs)}</dd>
            </>
          )}
          {notice.deliveredMs !== null && (
            <>
              <dt>{words.states.delivered}</dt>
              <dd>{at(notice.deliveredMs)}</dd>
            </>
          )}
          {notice.attempts > 1 && (
            <>
              <dt>{words.tries}</dt>
              <dd>{notice.attempts}</dd>
            </>
          )}
        </dl>
      </div>
      <div className="min-w-0">
        {(notice.error ?? notice.errorCode) && (
          <p className="mb-2 bg-stop-wash px-2 py-1 text-sm text-stop">
            {notice.error ?? errorText(notice.errorCode)}
          </p>
        )}
        {notice.subject && <p className="font-medium">{notice.subject}</p>}
        <p className="whitespace-pre-wrap break-words">{notice.body.replaceAll('{link}', words.ownLink)}</p>
      </div>
    </li>
  );
}

function errorText(code: string | null): string {
  if (code === 'superseded') return words.superseded;
  if (code === 'interrupted') return words.interrupted;
  return words.notSent(code);
}
