/**
 * What came of handing a message to a provider.
 * `accepted`: it has it. `refused`: it never will. `retry`: it does not have it, and may later. `unsure`: it may have it
 * (the connection broke, or nothing came back, after the message was on its way).
 * `code` is the provider's own where it gave one, otherwise the network's; it holds no number, address or text.
 */
export type SendResult =
  | { outcome: 'accepted'; providerId: string }
  | { outcome: 'refused' | 'retry' | 'unsure'; code: string };
