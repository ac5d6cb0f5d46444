/**
 * What the log keeps of an error. A database error's message holds the statement and its values, so of those only
 * the kind, code and constraint are kept.
 */
export function describeError(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { kind: typeof error };
  const { cause } = error;
  const fromDatabase = isDatabaseError(error) || isDatabaseError(cause);
  const named = isDatabaseError(cause) ? cause : isDatabaseError(error) ? error : undefined;
  return {
    kind: error.constructor.name,
    message: fromDatabase ? undefined : error.message,
    code: named?.code,
    constraint: named && 'constraint' in named ? named.constraint : undefined,
    stack: error.stack
      ?.split('\n')
      .filter((line) => /^\s+at /.test(line))
      .slice(0, 12),
  };
}

/** Errors of the driver carry a five-letter SQLSTATE; Drizzle's wrap them. */
function isDatabaseError(error: unknown): error is Error & { code?: unknown; constraint?: unknown } {
  if (!(error instanceof Error)) return false;
  if (error.constructor.name === 'DrizzleQueryError') return true;
  return 'code' in error && typeof error.code === 'string' && /^[0-9A-Z]{5}$/.test(error.code);
}
