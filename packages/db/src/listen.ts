import pg from 'pg';

const RETRY_MS = 1000;

/**
 * Listens on a channel over one connection of its own and connects again when that is lost. `onConnect` is called
 * after each connect, since what was notified meanwhile is gone. Returns how to stop.
 */
export function listen(
  url: string,
  channel: string,
  on: { payload: (payload: string) => void; connect?: () => void; lost?: () => void },
): () => Promise<void> {
  let client: pg.Client | null = null;
  let timer: NodeJS.Timeout | undefined;
  let stopped = false;

  const connect = async (): Promise<void> => {
    const mine = new pg.Client({
      connectionString: url,
      application_name: 'strikeboard listen',
      // Nothing is ever sent on this connection, so only the system's probes show that the other end is gone.
      keepAlive: true,
    });
    client = mine;
    const again = () => {
      if (stopped || client !== mine) return;
      client = null;
      on.lost?.();
      timer = setTimeout(() => void connect(), RETRY_MS);
    };
    mine.on('error', again);
    mine.on('end', again);
    mine.on('notification', ({ payload }) => on.payload(payload ?? ''));
    try {
      await mine.connect();
      await mine.query(`listen ${pg.escapeIdentifier(channel)}`);
      if (stopped) await mine.end();
      else on.connect?.();
    } catch {
      again();
    }
  };
  void connect();
  return async () => {
    stopped = true;
    clearTimeout(timer);
    await client?.end();
  };
}
