import { z } from 'zod';

/** One text, as the fake keeps it and as its JSON API gives it. */
export type SmsMessage = {
  sid: string;
  direction: 'outbound-api' | 'outbound-reply' | 'inbound';
  from: string;
  to: string;
  body: string;
  status: 'queued' | 'sent' | 'delivered' | 'undelivered' | 'received';
  errorCode: number | null;
  segments: number;
  createdAt: string;
  updatedAt: string;
  statusCallback: string | null;
  /** what the application answered to each status that was posted to it; null when it could not be reached */
  callbacks: { status: string; answered: number | null }[];
};

const repeated = z.object({ code: z.int().min(10000).max(99999), times: z.int().min(1).default(1) });

/** How a test makes the provider slow, unwilling or forgetful. */
export const smsControlSchema = z.strictObject({
  /** milliseconds before a request to send is answered */
  answerDelayMs: z.number().min(0).max(60_000).optional(),
  /** milliseconds before each status callback */
  callbackDelayMs: z.number().min(0).max(60_000).optional(),
  /** the next requests to send are refused with this error code of the provider */
  refuse: repeated.optional(),
  /** the next texts are accepted and then end as undelivered with this error code */
  undelivered: repeated.optional(),
  /** the next texts are accepted, and the connection is cut before the answer */
  loseAnswers: z.int().min(0).optional(),
  /** where texts sent by people are posted */
  inboundUrl: z.url().optional(),
  /** forgets all of the above but inboundUrl before the rest is applied, and every opt-out */
  reset: z.literal(true).optional(),
});

export type SmsControl = z.infer<typeof smsControlSchema>;

export const smsReplySchema = z.object({
  from: z.string().regex(/^\+[1-9]\d{1,14}$/, 'a number such as +13035550123'),
  to: z
    .string()
    .regex(/^\+[1-9]\d{1,14}$/, 'a number such as +17205550100')
    .optional(),
  body: z.string().min(1, 'a text of at least one character').max(1600, 'a text of at most 1600 characters'),
});

export type SmsReply = z.infer<typeof smsReplySchema>;
