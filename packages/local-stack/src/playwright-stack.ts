import path from 'node:path';
import { freePort } from './postgres.ts';
import { createStack } from './stack.ts';
import { repositoryRoot } from './workspace.ts';

/** Names under which browser tests find the stack that was started for them. */
export const E2E_NAMES = {
  webUrl: 'E2E_WEB_URL',
  inboxUrl: 'E2E_INBOX_URL',
  ownerUrl: 'E2E_OWNER_URL',
  adminUrl: 'E2E_ADMIN_URL',
  accounts: 'E2E_ACCOUNTS',
} as const;

/**
 * Playwright's global set-up: the whole stack on a database of its own, made anew, with no time to
 * settle. Servers run in a time zone that no fixture's site or viewer is in. Returns its end.
 */
export default async function setUp(): Promise<() => Promise<void>> {
  const dir = path.join(repositoryRoot, '.local/test-e2e');
  const stack = await createStack({
    ...{ dir, port: await freePort(), durable: false, settleSeconds: 0, say: console.log },
    env: { ...process.env, TZ: 'Asia/Tokyo' },
  });
  process.env[E2E_NAMES.webUrl] = stack.webUrl;
  process.env[E2E_NAMES.inboxUrl] = stack.inboxUrl;
  process.env[E2E_NAMES.ownerUrl] = stack.urls.owner;
  process.env[E2E_NAMES.adminUrl] = stack.adminUrl;
  process.env[E2E_NAMES.accounts] = JSON.stringify(stack.accounts);
  void stack.failed.then((sentence) => console.error(`\n${sentence}`));
  return () => stack.close();
}
