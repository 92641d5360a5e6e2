import { places } from './studio';

/** What a visitor was answered; `json` reads the body as JSON. */
export interface Answer {
  status: number;
  location: string | null;
  headers: Headers;
  body: string;
}

/** Somebody with cookies who speaks HTTP as a browser without scripts, or as an island, would. */
export class Visitor {
  readonly cookies = new Map<string, string>();

  constructor(
    readonly url: string = places.url,
    session?: { name: string; value: string },
  ) {
    if (session) this.cookies.set(session.name, session.value);
  }

  get(path: string, headers: Record<string, string> = { accept: 'text/html' }): Promise<Answer> {
    return this.send('GET', path, { headers });
  }

  /** Sends JSON, as islands do. */
  postJson(path: string, body: unknown): Promise<Answer> {
    return this.send('POST', path, { headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });
  }

  /** Sends a plain form, as a browser without scripts does. */
  postForm(path: string, fields: Record<string, string>): Promise<Answer> {
    return this.send('POST', path, { headers: { accept: 'text/html' }, body: new URLSearchParams(fields) });
  }

  async send(method: string, path: string, init: RequestInit): Promise<Answer> {
    const cookie = [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
    const headers = { ...(init.headers as Record<string, string>), origin: this.url, ...(cookie ? { cookie } : {}) };
    const response = await fetch(`${this.url}${path}`, { ...init, method, headers, redirect: 'manual' });
    for (const line of response.headers.getSetCookie()) this.keep(line);
    const location = response.headers.get('location');
    // Words alone are kept: a stream of news never ends, and a picture's bytes say nothing.
    const hasWords = /^(text\/(?!event-stream)|application\/json)/.test(response.headers.get('content-type') ?? '');
    if (!hasWords) await response.body?.cancel();
    const body = hasWords ? await response.text() : '';
    return { status: response.status, location, headers: response.headers, body };
  }

  private keep(line: string): void {
    const [pair = ''] = line.split(';', 1);
    const [name = '', value = ''] = pair.split(/=(.*)/s);
    if (value === '') this.cookies.delete(name);
    else this.cookies.set(name, value);
  }
}
