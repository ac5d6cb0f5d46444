import { z } from 'zod';
import { contract } from '../contract.ts';

const sumSchema = z.object({
  /** Exact decimals. */
  orderedYd3: z.string(),
  pencilledYd3: z.string(),
  firmYd3: z.string(),
  doneYd3: z.string(),
  visitCount: z.number(),
});

export const yardSheetSchema = z
  .object({
    zone: z.string(),
    weeks: z.array(
      z.object({
        startsOn: z.string(),
        when: z.enum(['past', 'current', 'next']),
        placed: sumSchema,
        waitingYd3: z.string(),
        waitingCount: z.number(),
      }),
    ),
    byCrew: z.array(
      z.object({
        crewId: z.string(),
        crewName: z.string(),
        ended: z.boolean(),
        total: sumSchema,
        weeks: z.array(sumSchema),
      }),
    ),
    total: sumSchema,
  })
  .meta({ id: 'YardSheet' });
export type YardSheetView = z.infer<typeof yardSheetSchema>;

export const readYardSheet = contract({
  method: 'GET',
  path: '/api/{slug}/yard-sheet',
  summary: 'Yards ordered by week and crew, eight weeks back and four ahead',
  access: ['owner', 'dispatcher'],
  output: yardSheetSchema,
});
