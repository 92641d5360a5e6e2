// What is kept on disk, and what the servers refuse to everybody outside this machine.
import { spawn, type ChildProcess } from 'node:child_process';
import { appendFileSync, readFileSync, writeFileSync } from 'node:fs';
import { connect } from 'node:net';
import { networkInterfaces } from 'node:os';
import { Resend } from 'resend';
import { expect, onTestFinished, test } from 'vitest';
import { startStripeFake } from '../../fakes/start';
import { control, freshFolder, runResend, runStripe, stripeClient } from './rig';

type Child = { process: ChildProcess; port: number; exit: Promise<number | null> };

/** Starts `fakes/server.ts` as its own process and waits until it says that it is ready. */
async function spawnFake(...args: string[]): Promise<Child> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'fakes/server.ts', ...args], {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  onTestFinished(() => void child.kill('SIGKILL'));
  const exit = new Promise<number | null>((resolve) => child.on('exit', resolve));
  const port = await new Promise<number>((resolve, reject) => {
    let said = '';
    child.stdout.on('data', (chunk: Buffer) => {
      said += chunk.toString();
      const found = /ready: http:\/\/127\.0\.0\.1:(\d+)/.exec(said);
      if (found) resolve(Number(found[1]));
    });
    child.on('exit', () => reject(new Error(`The fake ended: ${said}`)));
  });
  return { process: child, port, exit };
}

test('kill -9 right after an answer loses nothing of it; SIGTERM ends cleanly', async () => {
  const state = `${freshFolder()}/stripe.jsonl`;
  const first = await spawnFake('stripe', '--state', state);
  const ids: string[] = [];
  for (let count = 0; count < 5; count += 1) ids.unshift((await stripeClient(first.port).customers.create({})).id);
  first.process.kill('SIGKILL');
  await first.exit;
  const second = await spawnFake('stripe', '--state', state, '--port', '0');
  const kept = await stripeClient(second.port).customers.list();
  expect(kept.data.map((customer) => customer.id)).toEqual(ids);
  second.process.kill('SIGTERM');
  expect(await second.exit).toBe(0);
});

test('a fake that was asked to does not outlive the program that started it', async () => {
  const child = spawn(process.execPath, ['--import', 'tsx', 'fakes/server.ts', 'resend', '--until-stdin-ends']);
  onTestFinished(() => void child.kill('SIGKILL'));
  const exit = new Promise<number | null>((resolve) => child.on('exit', resolve));
  await new Promise((resolve) => child.stdout.once('data', resolve));
  child.stdin.end();
  expect(await exit).toBe(0);
});

test('a command that makes no sense is answered by the help text', async () => {
  const child = spawn(process.execPath, [
    '--import',
    'tsx',
    'fakes/server.ts',
    'stripe',
    '--webhook',
    'http://localhost:1/',
  ]);
  let said = '';
  child.stderr.on('data', (chunk: Buffer) => (said += chunk.toString()));
  expect(await new Promise((resolve) => child.on('close', resolve))).toBe(2);
  expect(said).toContain('--webhook and --webhook-secret belong together.');
  expect(said).toContain('--state FILE');
});

test('mails survive kill -9 as well', async () => {
  const state = `${freshFolder()}/resend.jsonl`;
  const first = await spawnFake('resend', '--state', state);
  const mail = { from: 'studio@example.org', to: 'isolde@example.org', subject: 'Your quote', text: 'Here it is.' };
  const sent = await new Resend('re_pourwright', { baseUrl: `http://127.0.0.1:${first.port}` }).emails.send(mail);
  first.process.kill('SIGKILL');
  await first.exit;
  const second = await runResend({ stateFile: state });
  expect((await second.resend.emails.get(sent.data?.id ?? '')).data?.subject).toBe('Your quote');
});

test('a last line cut short by a crash is dropped; a broken line before it stops the start with a sentence', async () => {
  const stateFile = `${freshFolder()}/stripe.jsonl`;
  const first = await runStripe({ stateFile });
  const made = await first.stripe.customers.create({});
  await first.close();
  const whole = readFileSync(stateFile, 'utf8');
  appendFileSync(stateFile, '[["customers","cus_half');
  const second = await runStripe({ stateFile });
  expect((await second.stripe.customers.list()).data.map((one) => one.id)).toEqual([made.id]);
  await second.close();
  writeFileSync(stateFile, `not json\n${whole}`);
  await expect(startStripeFake({ stateFile })).rejects.toThrow(/Line 1 of .*stripe\.jsonl cannot be read/);
});

test('a long state file is rewritten at the start and holds the same afterwards', async () => {
  const stateFile = `${freshFolder()}/stripe.jsonl`;
  const first = await runStripe({ stateFile });
  const made = await first.stripe.customers.create({});
  for (let count = 0; count < 210; count += 1) await first.stripe.customers.update(made.id, { name: `Name ${count}` });
  await first.close();
  const long = readFileSync(stateFile, 'utf8').length;
  const second = await runStripe({ stateFile });
  expect(await second.stripe.customers.retrieve(made.id)).toMatchObject({ name: 'Name 209' });
  expect((await second.stripe.events.list({ limit: 100 })).data[0]?.type).toBe('customer.updated');
  await second.close();
  expect(readFileSync(stateFile, 'utf8').length).toBeLessThan(long);
});

test('a taken port is said in a sentence', async () => {
  const { port } = await runStripe();
  await expect(startStripeFake({ port })).rejects.toThrow(`Port ${port} on 127.0.0.1 cannot be opened`);
});

test('the fakes listen on loopback only and refuse other names and foreign forms', async () => {
  const { port, url } = await runStripe();
  const outside = Object.values(networkInterfaces())
    .flatMap((list) => list ?? [])
    .find((one) => one.family === 'IPv4' && !one.internal);
  if (outside) {
    const reached = await new Promise<string>((resolve) => {
      const socket = connect(port, outside.address);
      socket.once('connect', () => resolve('connected'));
      socket.once('error', (error: NodeJS.ErrnoException) => resolve(error.code ?? 'failed'));
    });
    expect(reached).toBe('ECONNREFUSED');
  }
  const foreign = await fetch(`${url}/act`, {
    method: 'POST',
    headers: { origin: 'http://elsewhere.example' },
    body: '',
  });
  expect(foreign.status).toBe(403);
  const plain = await fetch(`${url}/__control`, {
    method: 'POST',
    headers: { 'content-type': 'text/plain' },
    body: '{}',
  });
  expect(plain.status).toBe(415);
});

test('switches are shown, checked and put back', async () => {
  const { url } = await runStripe();
  expect((await control(url, { delayMs: 5, dropAnswers: 2 })).status).toBe(200);
  expect((await control(url, { delay: 5 })).status).toBe(400);
  expect((await control(url, { webhookCopies: 0 })).status).toBe(400);
  expect(await (await fetch(`${url}/__control`)).json()).toMatchObject({ delayMs: 5, dropAnswers: 2 });
  await fetch(`${url}/__control`, { method: 'DELETE' });
  expect(await (await fetch(`${url}/__control`)).json()).toMatchObject({
    delayMs: 0,
    dropAnswers: 0,
    webhookCopies: 1,
  });
});
