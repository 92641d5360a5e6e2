import type { Problem } from '../commission/problem';

/** What a page is given; `Astro` and the middleware's context fit. */
interface Page {
  url: URL;
  locals: App.Locals;
  rewrite: (path: string) => Promise<Response>;
}

/** The sign-in page, which leads back to `from`. */
export function signInPath(from: URL): string {
  return `/sign-in?next=${encodeURIComponent(`${from.pathname}${from.search}`)}`;
}

/**
 * Answers a page's request with a refusal: to the sign-in page when that is what is missing, else the page for its
 * status (403, 404), which says the problem's sentence. In a page: `if (!found.ok) return turnAway(Astro, found.problem)`.
 */
export function turnAway(page: Page, problem: Problem): Response | Promise<Response> {
  if (problem.code === 'sign-in-needed') {
    return new Response(null, { status: 303, headers: { location: signInPath(page.url) } });
  }
  page.locals.turnedAway = problem;
  return page.rewrite(problem.code === 'not-found' ? '/404' : '/403');
}
