import type { FakeResponse } from './message';

/** Text that is already safe to stand in a page. */
export class Html {
  constructor(readonly text: string) {}
}

type Part = string | number | Html | Html[] | null | undefined | false;

/** Makes text safe to stand in a page or between quotes in an attribute. */
export function escape(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);
}

/** A template whose values are escaped unless they are Html themselves; null and false leave nothing. */
export function html(texts: TemplateStringsArray, ...parts: Part[]): Html {
  return new Html(texts.reduce((page, text, index) => page + render(parts[index - 1]) + text));
}

function render(part: Part): string {
  if (part === null || part === undefined || part === false) return '';
  if (part instanceof Html) return part.text;
  if (Array.isArray(part)) return part.map((one) => one.text).join('\n');
  return escape(String(part));
}

export type Page = {
  status?: number;
  title: string;
  /** Stands at the left of the head of the page. */
  name: string;
  /** Says in plain words that this is a stand-in. */
  standIn: string;
  narrow?: boolean;
  body: Html;
  /** A mail brings its own inline styles and pictures of this machine. */
  showsMail?: boolean;
};

/** A whole HTML page in the look of the fakes. It runs no script. */
export function page(parts: Page): FakeResponse {
  const styles = parts.showsMail ? "style-src 'self' 'unsafe-inline'" : "style-src 'self'";
  const pictures = parts.showsMail ? "img-src 'self' data: http://localhost:* http://127.0.0.1:*" : "img-src 'self'";
  const text = html`<!doctype html>
    <html lang="en">
      <head>
        <meta charset="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <title>${parts.title}</title>
        <link rel="icon" href="data:," />
        <link rel="stylesheet" href="/__look/look.css" />
      </head>
      <body class="${parts.narrow ? 'narrow' : ''}">
        <header class="masthead"><strong>${parts.name}</strong><span>${parts.standIn}</span></header>
        <main>${parts.body}</main>
      </body>
    </html> `.text;
  return {
    status: parts.status ?? 200,
    headers: {
      'content-type': 'text/html; charset=utf-8',
      'cache-control': 'no-store',
      'referrer-policy': 'same-origin',
      'x-content-type-options': 'nosniff',
      'content-security-policy': `default-src 'none'; ${styles}; ${pictures} data:; font-src 'self'; frame-src 'self'; frame-ancestors 'none'; base-uri 'none'`,
    },
    body: text,
  };
}

/** An instant as "1 Dec 2026, 14:05:09" in the reader's machine time. */
export function moment(at: Date): string {
  return at.toLocaleString('en-GB', {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    second: '2-digit',
  });
}
