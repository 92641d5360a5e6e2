import { connect, type Socket } from 'node:net';

/**
 * Asks for one path again and again over kept-open connections, each with one request on its way at a
 * time, and counts the answers. Reads no more of an answer than its length, so that it can outrun the server.
 *
 * @returns answers per second
 */
export async function answersPerSecond(port: number, path: string, connections: number, milliseconds: number) {
  const question = `GET ${path} HTTP/1.1\r\nHost: localhost:${port}\r\n\r\n`;
  const sockets = await Promise.all(Array.from({ length: connections }, () => open(port)));
  let answers = 0;
  const begun = performance.now();
  const end = begun + milliseconds;
  await Promise.all(sockets.map((socket) => keepAsking(socket, question, () => (answers += 1), end)));
  return (answers * 1000) / (performance.now() - begun);
}

function open(port: number): Promise<Socket> {
  return new Promise((resolve, reject) => {
    const socket = connect({ port, host: '127.0.0.1', noDelay: true }, () => resolve(socket));
    socket.once('error', reject);
  });
}

function keepAsking(socket: Socket, question: string, count: () => void, end: number): Promise<void> {
  return new Promise((resolve, reject) => {
    let missing = 0;
    socket.on('data', (chunk: Buffer) => {
      missing = missing === 0 ? lengthOf(chunk) - chunk.length : missing - chunk.length;
      if (missing > 0) return;
      missing = 0;
      count();
      if (performance.now() < end) socket.write(question);
      else socket.end();
    });
    socket.once('close', () => resolve());
    socket.once('error', reject);
    socket.write(question);
  });
}

/** The length of a whole answer, from its first piece, which holds the head. */
function lengthOf(first: Buffer): number {
  const head = first.indexOf('\r\n\r\n');
  const length = first.toString('latin1', 0, head).match(/content-length: (\d+)/i);
  if (head < 0 || !first.toString('latin1', 0, 12).endsWith('200') || !length) {
    throw new Error(`not the answer that was asked for: ${first.toString('latin1', 0, 200)}`);
  }
  return head + 4 + Number(length[1]);
}
