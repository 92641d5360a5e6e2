import { Writable } from 'node:stream';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { users } from '../../src/server/db/schema/people';
import { NotedFault, noteFault } from '../../src/server/faults';
import { createLog } from '../../src/server/log';
import type { Services } from '../../src/server/services';
import { createTestServices } from '../setup/database';

let services: Services;
let drop: () => Promise<void>;
beforeAll(async () => void ({ services, drop } = await createTestServices()));
afterAll(() => drop());

function listen() {
  const lines: string[] = [];
  const stream = new Writable({
    write(chunk: Buffer, _encoding, next) {
      lines.push(chunk.toString());
      next();
    },
  });
  return { lines, log: createLog('info', stream) };
}

it('logs a failed statement without the values in it', async () => {
  const { lines, log } = listen();
  const twice = async () => {
    for (let time = 0; time < 2; time++) {
      await services.db.insert(users).values({ email: 'private@example.org', name: 'Secret: a Name' });
    }
  };
  const error = await twice().then(
    () => expect.unreachable('an address stands once in the table'),
    (thrown: unknown) => thrown,
  );
  const fault = noteFault(log, error, 'POST /somewhere');
  const line = JSON.parse(lines[0]!) as { fault: string; err: { message: string; stack: string } };
  expect(line.fault).toBe(fault);
  expect(line.err.message).toContain('insert into "users"');
  expect(line.err.stack).toContain('faults.test.ts');
  expect(lines.join()).not.toMatch(/private@example|Secret|a Name/);
});

it('logs a fault once and gives the page the same id', () => {
  const { lines, log } = listen();
  const fault = noteFault(log, new Error('broken'), 'GET /x');
  expect(noteFault(log, new NotedFault(fault), 'GET /x')).toBe(fault);
  expect(lines).toHaveLength(1);
  expect(fault).toMatch(/^[2-9A-HJKMNP-Z]{8}$/);
  expect(noteFault(log, 'thrown as text', 'GET /x')).not.toBe(fault);
  expect(lines[1]).toContain('thrown as text');
});
