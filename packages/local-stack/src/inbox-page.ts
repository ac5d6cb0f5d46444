import type { Mail } from './fake-mail.ts';
import type { SmsMessage } from './sms-types.ts';

/** Pages of the fake inbox, as plain HTML. They show what the holders of phones and mailboxes would see. */

export const PAGE_HEADERS = {
  'content-type': 'text/html; charset=utf-8',
  'cache-control': 'no-store',
  'content-security-policy':
    "default-src 'none'; style-src 'unsafe-inline'; script-src 'self'; connect-src 'self'; img-src data:; form-action 'self'; base-uri 'none'; frame-ancestors 'none'",
} as const;

/** Looks for news every two seconds, and puts it in place unless a reply is being typed. */
export const PAGE_SCRIPT = `
let seen = document.documentElement.dataset.revision;
setInterval(async () => {
  const answer = await fetch('/_inbox/revision').catch(() => undefined);
  if (!answer || !answer.ok) return;
  const revision = await answer.text();
  if (revision === seen) return;
  const typed = document.querySelector('textarea');
  if (typed && typed.value !== '') {
    document.querySelector('[role=status]').textContent = 'Something new has come; it shows when you have sent your reply.';
    return;
  }
  const page = await fetch(location.href).catch(() => undefined);
  if (!page || !page.ok) return;
  const fresh = new DOMParser().parseFromString(await page.text(), 'text/html');
  document.querySelector('#messages').replaceWith(fresh.querySelector('#messages'));
  document.querySelector('[role=status]').textContent = 'Something new has come.';
  seen = revision;
}, 2000);
`;

const STYLE = `
:root { color-scheme: light dark; }
body { font: 1rem/1.5 system-ui, sans-serif; max-width: 46rem; margin: 0 auto; padding: 1rem; overflow-wrap: anywhere; }
h1 { font-size: 1.4rem; margin: 0.5rem 0; } h2 { font-size: 1.1rem; }
ul, ol { list-style: none; padding: 0; }
li { border: 1px solid color-mix(in srgb, currentColor 35%, transparent); border-radius: 0.5rem; padding: 0.6rem 0.8rem; margin: 0.5rem 0; }
li.from-holder { margin-left: 2rem; border-style: dashed; } li.to-holder { margin-right: 2rem; }
.text { white-space: pre-wrap; margin: 0.25rem 0; }
.small { font-size: 0.9rem; margin: 0; }
a { color: inherit; } li > a.whole { display: block; min-height: 2.75rem; }
label { display: block; font-weight: 600; }
textarea { width: 100%; box-sizing: border-box; font: inherit; padding: 0.5rem; }
button { font: inherit; min-height: 2.75rem; padding: 0.5rem 1.25rem; margin-top: 0.5rem; }
`;

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}

/** Escapes the text and makes its web addresses links, as a phone does. */
function withLinks(text: string): string {
  return text
    .split(/(https?:\/\/[^\s<>"']+[^\s<>"'.,;:!?)])/)
    .map((piece, index) =>
      index % 2 === 0
        ? escapeHtml(piece)
        : `<a href="${escapeHtml(piece)}" rel="noreferrer">${escapeHtml(piece)}</a>`,
    )
    .join('');
}

function time(iso: string): string {
  return `<time datetime="${iso}">${iso.slice(0, 10)} ${iso.slice(11, 19)} UTC</time>`;
}

function page(title: string, revision: string, messages: string, rest = ''): string {
  const back = title === 'Fake inbox' ? '' : '<nav><a href="/">All phones and mailboxes</a></nav>';
  return `<!doctype html>
<html lang="en" data-revision="${revision}">
<head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)} · Strikeboard's fake inbox</title><style>${STYLE}</style>
<noscript><meta http-equiv="refresh" content="5"></noscript><script src="/inbox.js" defer></script></head>
<body>${back}<main><h1>${escapeHtml(title)}</h1><p role="status" class="small"></p>
<div id="messages">${messages}</div>${rest}</main></body></html>
`;
}

/** Everyone who has been written to, the latest first. */
export function indexPage(revision: string, texts: readonly SmsMessage[], mails: readonly Mail[]): string {
  const phones = groupLatestFirst(texts, (text) => [holderOf(text)]);
  const boxes = groupLatestFirst(mails, (mail) => mail.to);
  const phoneItems = [...phones].map(([number, list]) => {
    const last = list.at(-1);
    return item(`/phone/${encodeURIComponent(number)}`, number, count(list.length, 'text'), last?.body ?? '');
  });
  const mailItems = [...boxes].map(([address, list]) => {
    const last = list.at(-1);
    return item(
      `/mail/${encodeURIComponent(address)}`,
      address,
      count(list.length, 'e-mail'),
      last?.subject ?? '',
    );
  });
  return page(
    'Fake inbox',
    revision,
    `<p>Nothing here has left this machine. These are the texts and e-mails that would have been sent.</p>
<section aria-labelledby="phones"><h2 id="phones">Phones</h2>${list(phoneItems, 'No text has been sent yet.')}</section>
<section aria-labelledby="mail"><h2 id="mail">Mailboxes</h2>${list(mailItems, 'No e-mail has been sent yet.')}</section>`,
  );
}

/** One phone's conversation, and a form to answer with. `texts` are those to and from it. */
export function phonePage(revision: string, number: string, texts: readonly SmsMessage[]): string {
  const items = texts.map((text) => {
    const isFromHolder = text.direction === 'inbound';
    const who = isFromHolder ? `${text.from} to ${text.to}` : `From ${text.from}`;
    return `<li class="${isFromHolder ? 'from-holder' : 'to-holder'}"><p class="small">${escapeHtml(who)}, ${time(text.createdAt)}</p>
<p class="text">${withLinks(text.body)}</p><p class="small">${escapeHtml(stateOf(text))}, ${count(text.segments, 'part')}</p></li>`;
  });
  const to = texts.findLast((text) => text.direction !== 'inbound')?.from ?? '';
  const form = `<form method="post" action="/phone/${encodeURIComponent(number)}">
<input type="hidden" name="to" value="${escapeHtml(to)}"><label for="body">Answer from this phone</label>
<textarea id="body" name="body" rows="3" maxlength="1600" required></textarea><button>Send</button></form>`;
  return page(number, revision, list(items, 'No text yet.', 'ol'), form);
}

/** One mailbox, the latest first. */
export function mailPage(revision: string, address: string, mails: readonly Mail[]): string {
  const items = mails.toReversed().map((mail) => {
    const files = mail.attachments.map(({ name, contentType }) => `${name || 'unnamed'} (${contentType})`);
    const attached = files.length > 0 ? `<p class="small">Attached: ${escapeHtml(files.join(', '))}</p>` : '';
    const asHtml =
      mail.html === null ? '' : `<p class="small"><a href="/mail/${mail.id}/html">As formatted</a></p>`;
    return `<li><h2>${escapeHtml(mail.subject || '(no subject)')}</h2>
<p class="small">From ${escapeHtml(mail.from)}, ${time(mail.receivedAt)}</p><p class="text">${withLinks(mail.text)}</p>${attached}${asHtml}</li>`;
  });
  return page(address, revision, list(items, 'No e-mail yet.', 'ol'));
}

function item(href: string, title: string, howMany: string, last: string): string {
  const start = last.length > 120 ? `${last.slice(0, 120)}…` : last;
  return `<li><a class="whole" href="${href}">${escapeHtml(title)}</a><p class="small">${howMany}, the last: ${escapeHtml(start)}</p></li>`;
}

function list(items: string[], ifEmpty: string, kind: 'ul' | 'ol' = 'ul'): string {
  return items.length === 0 ? `<p>${ifEmpty}</p>` : `<${kind}>${items.join('\n')}</${kind}>`;
}

function count(many: number, noun: string): string {
  return `${many} ${noun}${many === 1 ? '' : 's'}`;
}

function stateOf({ status, errorCode }: SmsMessage): string {
  return errorCode === null ? status : `${status} (error ${errorCode})`;
}

function holderOf(text: SmsMessage): string {
  return text.direction === 'inbound' ? text.from : text.to;
}

function groupLatestFirst<T>(items: readonly T[], keysOf: (item: T) => string[]): Map<string, T[]> {
  const groups = new Map<string, T[]>();
  for (const item of items) {
    for (const key of keysOf(item)) {
      const group = groups.get(key) ?? [];
      groups.delete(key);
      groups.set(key, [...group, item]);
    }
  }
  return new Map([...groups].toReversed());
}
