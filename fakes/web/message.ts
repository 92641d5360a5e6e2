/** One HTTP request as both fakes see it, whether it came over a socket or through an interceptor. */
export type FakeRequest = {
  method: string;
  /** Absolute address. */
  url: URL;
  /** Names in lower case. */
  headers: Record<string, string>;
  /** The body as UTF-8 text; empty when there was none. */
  body: string;
};

/** One HTTP answer. `lost` means: the work is done but the connection ends without an answer. */
export type FakeResponse = {
  status: number;
  headers: Record<string, string>;
  body: string | Uint8Array;
  lost?: boolean;
};

/** The whole of a fake service: one request in, one answer out. */
export type Handle = (request: FakeRequest) => Promise<FakeResponse>;

/** A JSON answer. */
export function json(status: number, value: unknown, headers: Record<string, string> = {}): FakeResponse {
  return { status, headers: { 'content-type': 'application/json', ...headers }, body: JSON.stringify(value, null, 2) };
}

/** A 303 answer: the browser fetches `location` next, by GET. */
export function seeOther(location: string): FakeResponse {
  return { status: 303, headers: { location, 'cache-control': 'no-store' }, body: '' };
}

/** Turns a fetch-style request (as an interceptor hands it over) into ours. */
export async function fromFetch(request: Request): Promise<FakeRequest> {
  return {
    method: request.method,
    url: new URL(request.url),
    headers: Object.fromEntries(request.headers),
    body: await request.text(),
  };
}

/** Turns our answer into a fetch-style one; a lost answer is a network error. */
export function toFetch(answer: FakeResponse): Response {
  if (answer.lost) return Response.error();
  const body = answer.status === 204 || answer.status === 303 ? null : Buffer.from(answer.body);
  return new Response(body, { status: answer.status, headers: answer.headers });
}

/** The fields of a posted HTML form; the last one wins when a name repeats. */
export function formFields(request: FakeRequest): Record<string, string> {
  return Object.fromEntries(new URLSearchParams(request.body));
}
