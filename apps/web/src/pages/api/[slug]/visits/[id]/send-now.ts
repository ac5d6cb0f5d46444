import { sendNow as send } from '@strikeboard/db/queries/board-change';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { sendNow } from '../../../../../lib/api/schemas/board.ts';

export const POST = companyEndpoint(sendNow, async ({ tx, params, nowMs }) => ({
  due: await send(tx, { visitId: params.id, nowMs }),
}));
