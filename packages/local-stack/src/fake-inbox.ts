import type { IncomingMessage, ServerResponse } from 'node:http';
import type { FakeMail } from './fake-mail.ts';
import type { FakeSms } from './fake-sms.ts';
import { listen, pathOf, RequestError, readBody, sendJson } from './http.ts';
import { indexPage, mailPage, PAGE_HEADERS, PAGE_SCRIPT, phonePage } from './inbox-page.ts';
import { smsReplySchema } from './sms-types.ts';

/** One server for the pages of phones and mailboxes, the JSON of both fakes, and the SMS provider's API. */
export type FakeInbox = {
  /** where people look, and the SMS provider's base address */
  url: string;
  close(): Promise<void>;
};

/** Starts it on loopback. Port 0 takes a free one. */
export async function startFakeInbox(options: {
  sms: FakeSms;
  mail: FakeMail;
  port?: number;
}): Promise<FakeInbox> {
  const { sms, mail, port = 0 } = options;
  const { url, close } = await listen((request, response) => {
    answer(request, response).catch((error: unknown) => {
      if (response.headersSent) response.destroy();
      else if (error instanceof RequestError) sendJson(response, error.status, { message: error.message });
      else {
        console.error(error);
        sendJson(response, 500, { message: 'the fake inbox failed; its log says why' });
      }
    });
  }, port);

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    refuseOtherSites(request);
    if ((await sms.handle(request, response)) || (await mail.handle(request, response))) return;
    const { pathname } = pathOf(request);
    const [, place = '', name = '', part] = pathname.split('/').map(decode);
    const route = `${request.method} ${place}`;
    if (pathname === '/') sendPage(response, indexPage(revision(), sms.messages(), mail.messages()));
    else if (pathname === '/inbox.js') {
      response.writeHead(200, { 'content-type': 'text/javascript; charset=utf-8' }).end(PAGE_SCRIPT);
    } else if (pathname === '/_inbox/revision') {
      response.writeHead(200, { 'content-type': 'text/plain', 'cache-control': 'no-store' }).end(revision());
    } else if (route === 'GET phone') sendPage(response, phonePage(revision(), name, sms.messages(name)));
    else if (route === 'POST phone') await takeReply(request, response, name);
    else if (route === 'GET mail' && part === 'html') sendMailHtml(response, name);
    else if (route === 'GET mail') sendPage(response, mailPage(revision(), name, mail.messages(name)));
    else throw new RequestError(404, `there is no page ${pathname}`);
  }

  async function takeReply(request: IncomingMessage, response: ServerResponse, from: string): Promise<void> {
    const form = new URLSearchParams(await readBody(request));
    const reply = smsReplySchema.safeParse({
      from,
      to: form.get('to') || undefined,
      body: form.get('body') ?? '',
    });
    if (!reply.success) {
      throw new RequestError(400, reply.error.issues.map(({ message }) => message).join('; '));
    }
    await sms.reply(reply.data);
    response.writeHead(303, { location: `/phone/${encodeURIComponent(from)}` }).end();
  }

  function sendMailHtml(response: ServerResponse, id: string): void {
    const found = mail.messages().find((message) => message.id === id);
    if (!found?.html) throw new RequestError(404, 'there is no such e-mail');
    // A message's own HTML may show itself and lead elsewhere, and nothing more.
    const policy =
      "sandbox allow-popups allow-top-navigation-by-user-activation; default-src 'none'; style-src 'unsafe-inline'; img-src data:";
    response.writeHead(200, { ...PAGE_HEADERS, 'content-security-policy': policy }).end(found.html);
  }

  /** Changes with every text, every e-mail, and every change of a text's state. */
  function revision(): string {
    const texts = sms.messages();
    const states = texts.map(({ status }) => status.length).reduce((sum, length) => sum + length, 0);
    return `${texts.length}-${states}-${texts.at(-1)?.sid ?? ''}-${mail.messages().at(-1)?.id ?? ''}`;
  }

  return { url, close };
}

/** Neither a page elsewhere nor a name that was pointed at this machine may act here. */
function refuseOtherSites(request: IncomingMessage): void {
  const { host = '', origin } = request.headers;
  if (!/^(127\.0\.0\.1|localhost)(:\d+)?$/.test(host)) throw new RequestError(403, 'only for this machine');
  if (origin !== undefined && origin !== `http://${host}`)
    throw new RequestError(403, 'only from its own pages');
}

function sendPage(response: ServerResponse, html: string): void {
  response.writeHead(200, PAGE_HEADERS).end(html);
}

function decode(part: string): string {
  try {
    return decodeURIComponent(part);
  } catch {
    throw new RequestError(400, 'the address is not well formed');
  }
}
