import { listNotices as list } from '@strikeboard/db/queries/notice-list';
import { companyEndpoint } from '../../../lib/api/endpoint.ts';
import { listNotices } from '../../../lib/api/schemas/notices.ts';

export const GET = companyEndpoint(listNotices, async ({ tx, query }) => list(tx, query));
