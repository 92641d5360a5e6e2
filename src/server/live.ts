import pg from 'pg';
import type { Services } from './services';

type Listener = () => void;

interface Wire {
  listeners: Map<string, Set<Listener>>;
  client: pg.Client | null;
  opening: Promise<void> | null;
}

const WIRES = new WeakMap<Services, Wire>();
const RETRY_MS = 1_000;

function wireOf(services: Services): Wire {
  const known = WIRES.get(services);
  if (known) return known;
  const made: Wire = { listeners: new Map(), client: null, opening: null };
  WIRES.set(services, made);
  return made;
}

/**
 * Calls `listener` each time the history of this commission grows. One database connection serves all
 * listeners of the process; when it breaks it is opened again and everybody is woken once, since
 * something may have been missed. Returns how to stop.
 *
 * @throws when the database cannot be reached at first
 */
export async function watchCommission(
  services: Services,
  commissionId: string,
  listener: Listener,
): Promise<() => void> {
  const wire = wireOf(services);
  const set = wire.listeners.get(commissionId) ?? new Set();
  set.add(listener);
  wire.listeners.set(commissionId, set);
  const stop = () => {
    set.delete(listener);
    if (set.size === 0 && wire.listeners.get(commissionId) === set) wire.listeners.delete(commissionId);
    if (wire.listeners.size === 0) closeWire(services, wire);
  };
  try {
    await openWire(services, wire);
  } catch (error) {
    stop();
    throw error;
  }
  return stop;
}

async function openWire(services: Services, wire: Wire): Promise<void> {
  if (wire.client) return;
  wire.opening ??= connect(services, wire).finally(() => {
    wire.opening = null;
  });
  await wire.opening;
}

async function connect(services: Services, wire: Wire): Promise<void> {
  const client = new pg.Client({ connectionString: services.config.databaseUrl, connectionTimeoutMillis: 5_000 });
  client.on('error', (error) => {
    services.log.warn({ err: error }, 'the connection that carries live news broke');
    if (wire.client === client) wire.client = null;
    reopenLater(services, wire);
  });
  client.on('notification', ({ payload }) => {
    for (const listener of wire.listeners.get(payload ?? '') ?? []) listener();
  });
  await client.connect();
  await client.query('listen commission');
  wire.client = client;
  // Everybody may have left while it was opening.
  if (wire.listeners.size === 0) closeWire(services, wire);
}

function reopenLater(services: Services, wire: Wire): void {
  setTimeout(() => {
    if (wire.listeners.size === 0) return;
    openWire(services, wire).then(
      () => wire.listeners.forEach((set) => set.forEach((listener) => listener())),
      () => reopenLater(services, wire),
    );
  }, RETRY_MS).unref();
}

function closeWire(services: Services, wire: Wire): void {
  const { client } = wire;
  wire.client = null;
  client?.end().catch((error: unknown) => services.log.warn({ err: error }, 'the live connection did not close'));
}
