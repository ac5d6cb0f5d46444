import { noticeStore } from '@strikeboard/db/queries/notice-store';
import { readReport, recordReport } from '@strikeboard/notices/status';
import { openEndpoint } from '../../../lib/api/endpoint.ts';
import { invalid } from '../../../lib/api/problems.ts';
import { smsStatus } from '../../../lib/api/schemas/webhooks.ts';
import { readSignedForm } from '../../../lib/server/signed-form.ts';

export const POST = openEndpoint(smsStatus, async ({ context, db, nowMs }) => {
  const form = await readSignedForm(context);
  const report = readReport(context.url.searchParams, form);
  if (report === null) {
    throw invalid([{ field: 'MessageStatus', value: null, expected: 'a message id and its status' }]);
  }
  await recordReport(noticeStore(db), report, nowMs);
  return new Response(null, { status: 204 });
});
