import {
  type APIRequestContext,
  type BrowserContextOptions,
  test as base,
  expect,
  type Page,
} from '@playwright/test';

export { expect } from '@playwright/test';

/** Demo accounts, by what they do. */
export const accounts = {
  owner: 'lorna.vickery@example.com',
  dispatcher: 'dana.holloway@example.com',
  secondDispatcher: 'marisol.trevino@example.com',
  foreman: 'ray.sandoval@example.com',
  finisher: 'beto.arriaga@example.com',
  sub: 'ruben.carrasco@example.com',
  otherOwner: 'arlene.voss@example.com',
  otherDispatcher: 'teo.galindo@example.com',
} as const;

/** The two demo companies. */
export const companies = {
  cedarFlat: { slug: 'cedar-flat', zone: 'America/Denver' },
  prairieLine: { slug: 'prairie-line', zone: 'America/Chicago' },
} as const;

/** A variable that the stack's set-up leaves for the tests. */
export function fromStack(name: 'E2E_WEB_URL' | 'E2E_INBOX_URL' | 'E2E_OWNER_URL' | 'E2E_ACCOUNTS'): string {
  const value = process.env[name];
  if (!value) throw new Error(`${name} is not set: run these tests with npm test.`);
  return value;
}

function passwordOf(email: string): string {
  const known: { email: string; password: string }[] = JSON.parse(fromStack('E2E_ACCOUNTS'));
  const account = known.find((one) => one.email === email);
  if (!account) throw new Error(`${email} is no demo account.`);
  return account.password;
}

type Session = Awaited<ReturnType<APIRequestContext['storageState']>>;
/** One session per account and worker, since tries to sign in are counted. */
const sessions = new Map<string, Session>();

export interface Fixtures {
  /** Signs in on the page by typing, and waits for what comes after it. */
  signIn: (page: Page, email: string) => Promise<void>;
  /** A page of a browser of one's own, signed in; null: nobody is. */
  openAs: (email: string | null, options?: BrowserContextOptions) => Promise<Page>;
  /** Requests with a person's session and without a browser; null: nobody's. */
  apiAs: (email: string | null) => Promise<APIRequestContext>;
  /** Lets messages on the console pass that a test means to cause; any other fails it. */
  allowOnConsole: (pattern: RegExp) => void;
}

export const test = base.extend<Fixtures & { console: { allowed: RegExp[]; seen: string[] } }>({
  console: [
    async ({ context }, use) => {
      const kept = { allowed: [] as RegExp[], seen: [] as string[] };
      watch(context, kept.seen);
      await use(kept);
      const unexpected = kept.seen.filter((text) => !kept.allowed.some((pattern) => pattern.test(text)));
      expect(unexpected, 'errors on the console').toEqual([]);
    },
    { auto: true },
  ],
  allowOnConsole: async ({ console }, use) => {
    await use((pattern) => void console.allowed.push(pattern));
  },
  // biome-ignore lint/correctness/noEmptyPattern: the test runner reads the pattern, and wants one.
  signIn: async ({}, use) => {
    await use(async (page, email) => {
      await page.goto('/sign-in');
      await page.getByLabel('E-mail').fill(email);
      await page.getByLabel('Password').fill(passwordOf(email));
      await page.getByRole('button', { name: 'Sign in' }).click();
      await expect(page).not.toHaveURL(/sign-in/);
    });
  },
  openAs: async ({ browser, console, playwright }, use) => {
    const opened: { close: () => Promise<void> }[] = [];
    await use(async (email, options = {}) => {
      const storageState = email === null ? undefined : await sessionOf(playwright.request, email);
      const context = await browser.newContext({ ...options, ...(storageState && { storageState }) });
      opened.push(context);
      watch(context, console.seen);
      return context.newPage();
    });
    for (const context of opened) await context.close();
  },
  apiAs: async ({ playwright }, use) => {
    const opened: APIRequestContext[] = [];
    await use(async (email) => {
      const storageState = email === null ? undefined : await sessionOf(playwright.request, email);
      const context = await playwright.request.newContext({
        baseURL: fromStack('E2E_WEB_URL'),
        ...(storageState && { storageState }),
      });
      opened.push(context);
      return context;
    });
    for (const context of opened) await context.dispose();
  },
});

function watch(context: ReturnType<Page['context']>, seen: string[]): void {
  context.on('console', (message) => {
    if (message.type() === 'error') seen.push(message.text());
  });
  context.on('weberror', (error) => seen.push(`uncaught: ${error.error().stack ?? error.error().message}`));
}

async function sessionOf(
  request: { newContext: (options: { baseURL: string }) => Promise<APIRequestContext> },
  email: string,
): Promise<Session> {
  const known = sessions.get(email);
  if (known) return known;
  const context = await request.newContext({ baseURL: fromStack('E2E_WEB_URL') });
  const form = { email, password: passwordOf(email) };
  const answer = await context.post('/sign-in', { form, maxRedirects: 0 });
  expect(answer.status(), `${email} signs in`).toBe(303);
  const session = await context.storageState();
  await context.dispose();
  sessions.set(email, session);
  return session;
}
