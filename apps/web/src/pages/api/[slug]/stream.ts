import { type Database, inCompany } from '@strikeboard/db/client';
import { listCrews } from '@strikeboard/db/queries/set-up-crews';
import { membershipBySlug } from '@strikeboard/db/queries/sign-in';
import { memberEndpoint } from '../../../lib/api/endpoint.ts';
import { streamBoard } from '../../../lib/api/schemas/board.ts';
import type { Company, SignedIn } from '../../../lib/locals.ts';
import { follow } from '../../../lib/server/board-hub.ts';
import { patchOfLanes } from '../../../lib/server/foreman-view.ts';

const KEEP_ALIVE_MS = 20_000;
/** A stream may last for days: whether its reader still belongs to the company is looked up this often. */
const CHECK_EVERY = 3;

export const GET = memberEndpoint(streamBoard, async ({ query, context, company, person, db, nowMs }) => {
  // A browser that connects again says itself how far it has come.
  const lastSeen = Number(context.request.headers.get('last-event-id') ?? Number.NaN);
  const since = Number.isSafeInteger(lastSeen) && lastSeen >= 0 ? lastSeen : query.since;
  const lanes = company.role === 'foreman' ? await lanesOf(db, company, person, nowMs) : null;
  return new Response(eventsOf({ since, company, person, db, lanes }), {
    headers: {
      'Content-Type': 'text/event-stream',
      'Cache-Control': 'no-store',
      'X-Accel-Buffering': 'no',
    },
  });
});

function eventsOf(of: {
  since: number;
  company: Company;
  person: SignedIn;
  db: Database;
  lanes: ReadonlySet<string> | null;
}): ReadableStream<Uint8Array> {
  const { since, company, person, db, lanes } = of;
  const encoder = new TextEncoder();
  let end = () => {};
  return new ReadableStream({
    start(controller) {
      let isOver = false;
      const write = (text: string) => {
        if (!isOver) controller.enqueue(encoder.encode(text));
      };
      const close = () => {
        end();
        controller.close();
      };
      const unfollow = follow({
        companyId: company.id,
        revision: since,
        onPatch: (patch) => {
          const shown = lanes ? patchOfLanes(patch, lanes) : patch;
          write(`event: change\nid: ${patch.revision}\ndata: ${JSON.stringify(shown)}\n\n`);
        },
        onReload: () => {
          write('event: reload\ndata: {}\n\n');
          close();
        },
        onClose: close,
      });
      let beats = 0;
      const timer = setInterval(() => {
        write(': keep-alive\n\n');
        beats += 1;
        if (beats % CHECK_EVERY !== 0) return;
        membershipBySlug(db, person.id, company.slug)
          .then((membership) => {
            if (membership?.role !== company.role && !isOver) close();
          })
          // The database is away: the next beat asks again.
          .catch(() => {});
      }, KEEP_ALIVE_MS);
      end = () => {
        isOver = true;
        clearInterval(timer);
        unfollow();
      };
      write(`retry: 2000\n\n`);
    },
    cancel: () => end(),
  });
}

async function lanesOf(
  db: Database,
  company: Company,
  person: SignedIn,
  atMs: number,
): Promise<ReadonlySet<string>> {
  const crews = await inCompany(db, { companyId: company.id, personId: person.id }, (tx) =>
    listCrews(tx, { atMs }),
  );
  return new Set(
    crews
      .filter(({ foremanId, memberIds }) => foremanId === person.id || memberIds.includes(person.id))
      .map(({ id }) => id),
  );
}
