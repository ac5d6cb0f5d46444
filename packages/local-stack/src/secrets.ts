import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { z } from 'zod';

const secretsSchema = z.object({
  superuserPassword: z.string().min(32),
  ownerPassword: z.string().min(32),
  webPassword: z.string().min(32),
  workerPassword: z.string().min(32),
  authSecret: z.string().min(32),
  smsAccountSid: z.string().regex(/^AC[0-9a-f]{32}$/),
  smsAuthToken: z.string().min(32),
});

/** Passwords and keys of one local installation. All are hex digits, so they need no quoting anywhere. */
export type Secrets = z.infer<typeof secretsSchema>;

export function randomSecrets(): Secrets {
  const hex = (bytes: number) => randomBytes(bytes).toString('hex');
  return {
    superuserPassword: hex(24),
    ownerPassword: hex(24),
    webPassword: hex(24),
    workerPassword: hex(24),
    authSecret: hex(32),
    smsAccountSid: `AC${hex(16)}`,
    smsAuthToken: hex(16),
  };
}

/**
 * The secrets kept in `file` (mode 0600). New ones are made when it is missing or damaged: the cluster
 * takes new passwords at its next start, so nothing but open sessions depends on the old ones.
 */
export function loadSecrets(file: string): Secrets {
  const kept = readSecrets(file);
  if (kept) return kept;
  const secrets = randomSecrets();
  mkdirSync(path.dirname(file), { recursive: true });
  const partial = `${file}.${process.pid}`;
  writeFileSync(partial, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600 });
  renameSync(partial, file);
  return secrets;
}

function readSecrets(file: string): Secrets | undefined {
  let text: string;
  try {
    text = readFileSync(file, 'utf8');
  } catch {
    return undefined;
  }
  try {
    return secretsSchema.parse(JSON.parse(text));
  } catch {
    return undefined;
  }
}
