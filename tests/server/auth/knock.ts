import type { APIContext, APIRoute } from 'astro';
import { readSession } from '../../../src/server/auth/session';
import type { Services } from '../../../src/server/services';

/** A browser as far as doors see it: it keeps cookies, and knocks from one network address. */
export class Browser {
  readonly cookies = new Map<string, string>();
  constructor(
    private readonly services: Services,
    private readonly address = '192.0.2.7',
  ) {}

  /** Posts to an endpoint as a page's form (urlencoded) or an island (JSON) does. */
  async post(route: APIRoute, body: Record<string, string>, ways: Knock = {}): Promise<Response> {
    const url = new URL(ways.path ?? '/api', this.services.config.publicUrl);
    const headers = new Headers({ cookie: this.#cookieHeader(), origin: url.origin, ...ways.headers });
    headers.set('content-type', ways.json ? 'application/json' : 'application/x-www-form-urlencoded');
    const text = ways.json ? JSON.stringify(body) : new URLSearchParams(body).toString();
    return this.#knock(route, new Request(url, { method: 'POST', headers, body: text }), ways);
  }

  async get(route: APIRoute, ways: Knock = {}): Promise<Response> {
    const url = new URL(ways.path ?? '/api', this.services.config.publicUrl);
    return this.#knock(route, new Request(url, { headers: { cookie: this.#cookieHeader() } }), ways);
  }

  #cookieHeader(): string {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
  }

  async #knock(route: APIRoute, request: Request, { params = {} }: Knock): Promise<Response> {
    const { user } = await readSession(this.services, request.headers.get('cookie'));
    const context = {
      request,
      url: new URL(request.url),
      params,
      clientAddress: this.address,
      locals: { services: this.services, user, browserId: 'a-browser-of-the-tests' },
      cookies: {
        get: (name: string) => (this.cookies.has(name) ? { value: this.cookies.get(name) } : undefined),
        set: (name: string, value: string) => void this.cookies.set(name, value),
        delete: (name: string) => void this.cookies.delete(name),
      },
    };
    return route(context as unknown as APIContext);
  }
}

interface Knock {
  path?: string;
  json?: boolean;
  headers?: Record<string, string>;
  params?: Record<string, string>;
}
