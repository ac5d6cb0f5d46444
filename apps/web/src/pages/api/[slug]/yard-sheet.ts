import { readYardSheet as read } from '@strikeboard/db/queries/yard-sheet';
import { companyEndpoint } from '../../../lib/api/endpoint.ts';
import { readYardSheet } from '../../../lib/api/schemas/yard-sheet.ts';

export const GET = companyEndpoint(readYardSheet, async ({ tx, nowMs }) => read(tx, { nowMs }));
