import { inCompany } from '@strikeboard/db/client';
import { listen } from '@strikeboard/db/listen';
import { BOARD_CHANNEL, type BoardPatch, changesSince } from '@strikeboard/db/queries/board-change';
import { env } from '../../env.ts';
import { onClosing } from './closing.ts';
import { database } from './database.ts';
import { describeError } from './describe-error.ts';
import { log } from './log.ts';

/** A browser that follows a company's board. */
export interface Follower {
  companyId: string;
  /** The last revision it has been sent. */
  revision: number;
  onPatch(patch: BoardPatch): void;
  /** It is too far behind to be brought up to date by changes. */
  onReload(): void;
  onClose(): void;
}

/** One LISTEN per process; each change is read once per company and handed to everyone who follows it. */
const followers = new Map<string, Set<Follower>>();
const running = new Map<string, { again: boolean }>();
let stop: (() => Promise<void>) | undefined;

/** Begins to follow from the follower's revision on; returns how to end it. */
export function follow(follower: Follower): () => void {
  start();
  const ofCompany = followers.get(follower.companyId) ?? new Set();
  ofCompany.add(follower);
  followers.set(follower.companyId, ofCompany);
  void catchUp(follower.companyId);
  return () => {
    ofCompany.delete(follower);
    if (ofCompany.size === 0 && followers.get(follower.companyId) === ofCompany) {
      followers.delete(follower.companyId);
    }
  };
}

function start(): void {
  if (stop) return;
  const all = () => {
    // What was notified while the connection was lost is gone, so everyone is looked after anew.
    for (const companyId of followers.keys()) void catchUp(companyId);
  };
  const ended = listen(env().DATABASE_URL, BOARD_CHANNEL, {
    payload: (payload) => {
      const [companyId = ''] = payload.split(':');
      if (followers.has(companyId)) void catchUp(companyId);
    },
    connect: all,
    lost: () => log.warn('the connection for board changes was lost; connecting again'),
  });
  stop = ended;
  onClosing(async () => {
    for (const ofCompany of followers.values()) for (const follower of ofCompany) follower.onClose();
    followers.clear();
    await ended();
  });
}

/** Sends a company's followers what they have not seen. One run at a time; a call meanwhile makes it run again. */
async function catchUp(companyId: string): Promise<void> {
  const current = running.get(companyId);
  if (current) {
    current.again = true;
    return;
  }
  const run = { again: true };
  running.set(companyId, run);
  try {
    while (run.again) {
      run.again = false;
      await sendMissing(companyId);
    }
  } catch (error) {
    // The next change, or the next connect, tries again from the same revision.
    log.error({ error: describeError(error) }, 'board changes could not be read');
  } finally {
    running.delete(companyId);
  }
}

async function sendMissing(companyId: string): Promise<void> {
  const ofCompany = [...(followers.get(companyId) ?? [])];
  if (ofCompany.length === 0) return;
  for (const [revision, group] of byRevision(ofCompany)) {
    const patches = await inCompany(database(), { companyId, personId: null }, (tx) =>
      changesSince(tx, revision),
    );
    for (const follower of group) {
      if (patches === null) follower.onReload();
      else for (const patch of patches) send(follower, patch);
    }
  }
}

function send(follower: Follower, patch: BoardPatch): void {
  if (patch.revision <= follower.revision) return;
  follower.revision = patch.revision;
  follower.onPatch(patch);
}

/** Nearly all have seen the same; newcomers are the exception. */
function byRevision(list: readonly Follower[]): Map<number, Follower[]> {
  const groups = new Map<number, Follower[]>();
  for (const follower of list) {
    groups.set(follower.revision, [...(groups.get(follower.revision) ?? []), follower]);
  }
  return groups;
}
