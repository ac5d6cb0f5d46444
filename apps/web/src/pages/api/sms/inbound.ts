import { inboundStore } from '@strikeboard/db/queries/notice-inbound';
import { receiveText } from '@strikeboard/notices/inbound';
import { openEndpoint } from '../../../lib/api/endpoint.ts';
import { smsInbound } from '../../../lib/api/schemas/webhooks.ts';
import { log } from '../../../lib/server/log.ts';
import { readSignedForm } from '../../../lib/server/signed-form.ts';

export const POST = openEndpoint(smsInbound, async ({ context, db, nowMs }) => {
  const form = await readSignedForm(context);
  const { twiml, kind, answered } = await receiveText({ store: inboundStore(db), form, nowMs });
  log.info({ kind, ...answered }, 'text received');
  return new Response(twiml, { headers: { 'Content-Type': 'text/xml' } });
});
