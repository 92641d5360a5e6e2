import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { FakeResponse } from './message';

/** The look of both fakes: chalk ground, graphite ink, verdigris for what is paid, molten for the one main act. */
const CSS = `
@font-face { font-family: 'Archivo'; src: url('/__look/archivo.woff2') format('woff2'); font-weight: 100 900; font-display: swap; }
@font-face { font-family: 'Fraunces'; src: url('/__look/fraunces-500.woff2') format('woff2'); font-weight: 500; font-display: swap; }
@font-face { font-family: 'Fraunces'; src: url('/__look/fraunces-600.woff2') format('woff2'); font-weight: 600; font-display: swap; }
:root {
  --chalk: oklch(0.972 0.005 195); --graphite: oklch(0.25 0.018 215); --muted: oklch(0.47 0.02 210);
  --hairline: oklch(0.86 0.012 200); --verdigris: oklch(0.47 0.075 185); --tint: oklch(0.90 0.035 185);
  --molten: oklch(0.68 0.19 47); --loss: oklch(0.50 0.17 35);
  color-scheme: light;
}
* { box-sizing: border-box; }
html { background: var(--chalk); color: var(--graphite); font: 16px/1.5 'Archivo', system-ui, sans-serif; }
body { margin: 0 auto; max-width: 72rem; padding: 0 1.25rem 4rem; font-variant-numeric: tabular-nums; }
body.narrow { max-width: 38rem; }
h1, h2 { font-family: 'Fraunces', Georgia, serif; font-weight: 500; line-height: 1.15; text-wrap: balance; }
h1 { font-size: clamp(1.75rem, 1.3rem + 2vw, 2.5rem); margin: 1.75rem 0 0.5rem; overflow-wrap: anywhere; }
h2 { font-size: 1.375rem; margin: 2.5rem 0 0.5rem; }
p { margin: 0.5rem 0; max-width: 62ch; }
a { color: inherit; text-decoration-thickness: 1px; text-underline-offset: 0.2em; }
a:hover { color: var(--verdigris); }
.masthead { border-bottom: 2px solid var(--graphite); padding: 1rem 0 0.75rem; display: flex; flex-wrap: wrap; gap: 0.25rem 2rem; align-items: baseline; justify-content: space-between; }
.masthead strong { font-family: 'Fraunces', Georgia, serif; font-weight: 600; font-size: 1.25rem; }
.muted, .masthead span { color: var(--muted); font-size: 0.9375rem; }
.said { background: var(--tint); padding: 0.75rem 1rem; margin: 1rem 0; max-width: none; clip-path: polygon(0 0, 100% 0, calc(100% - 5px) 100%, 5px 100%); }
.said.bad { background: none; border-left: 4px solid var(--loss); clip-path: none; color: var(--loss); font-weight: 600; }
.lines { width: 100%; border-collapse: collapse; margin: 1rem 0; }
.lines th, .lines td { text-align: left; vertical-align: top; padding: 0.625rem 1rem 0.625rem 0; border-bottom: 1px solid var(--hairline); font-weight: 400; overflow-wrap: anywhere; }
.lines thead th { color: var(--muted); font-size: 0.875rem; }
.lines .money { text-align: right; white-space: nowrap; }
.lines .money:last-child { padding-right: 0; }
.lines .total > * { border-top: 2px solid var(--graphite); border-bottom: 0; font-weight: 700; font-size: 1.125rem; }
.state { font-weight: 600; }
.state.good { color: var(--verdigris); }
.state.bad { color: var(--loss); }
fieldset { border: 0; margin: 1.5rem 0 0; padding: 0; }
legend, .label { font-weight: 700; padding: 0; display: block; }
.choice { display: grid; grid-template-columns: 1.5rem 1fr; gap: 0 0.75rem; margin: 0 -0.75rem; padding: 0.75rem; border-bottom: 1px solid var(--hairline); cursor: pointer; }
.choice input { inline-size: 1.375rem; block-size: 1.375rem; margin: 0.0625rem 0 0; accent-color: var(--verdigris); grid-row: span 2; }
.choice:has(:checked) { background: var(--tint); }
.choice span { color: var(--muted); font-size: 0.9375rem; grid-column: 2; }
.choice:has(:checked) span { color: var(--graphite); }
input[type='text'], input[type='email'], input[type='search'] { font: inherit; color: inherit; background: #fff; border: 1px solid var(--graphite); border-radius: 0; padding: 0.625rem 0.75rem; inline-size: 100%; margin-top: 0.25rem; }
input[readonly] { background: none; border-color: var(--hairline); }
button, .button { font: inherit; font-weight: 700; color: var(--chalk); background: var(--graphite); border: 0; border-radius: 0; padding: 0.5rem 1.125rem; min-height: 2.25rem; cursor: pointer; text-decoration: none; display: inline-block; clip-path: polygon(0 0, 100% 0, calc(100% - 5px) 100%, 5px 100%); }
button:hover, .button:hover { color: var(--chalk); background: oklch(0.35 0.02 215); }
button.main { background: var(--molten); color: oklch(0.2 0.02 40); padding: 0.875rem 2rem; font-size: 1.125rem; min-height: 3.25rem; clip-path: polygon(0 0, 100% 0, calc(100% - 9px) 100%, 9px 100%); }
button.main:hover { background: oklch(0.74 0.17 52); }
button.plain { background: none; color: inherit; font-weight: 400; text-decoration: underline; text-underline-offset: 0.2em; padding: 0.25rem 0; clip-path: none; }
button.plain:hover { background: none; color: var(--verdigris); }
:focus-visible { outline: 3px solid var(--verdigris); outline-offset: 2px; }
button:focus-visible, .button:focus-visible { outline-color: var(--chalk); outline-offset: -6px; }
button.plain:focus-visible { outline-color: var(--verdigris); outline-offset: 2px; }
.acts { display: flex; flex-wrap: wrap; gap: 0.5rem 1.25rem; align-items: center; margin: 1.5rem 0 0; }
.acts form { margin: 0; }
td .acts { margin: -0.375rem 0; }
.search { display: flex; flex-wrap: wrap; gap: 0.75rem; align-items: end; margin: 1.25rem 0; }
.search label { flex: 1 1 14rem; max-width: 26rem; }
.search button { min-height: 2.875rem; }
.letters { list-style: none; margin: 1rem 0; padding: 0; border-top: 1px solid var(--hairline); }
.letters a { display: grid; grid-template-columns: 14rem 1fr auto; gap: 0 1.5rem; padding: 0.75rem 0; border-bottom: 1px solid var(--hairline); text-decoration: none; overflow-wrap: anywhere; }
.letters a:hover .subject { text-decoration: underline; }
.letters .subject { font-weight: 600; }
.letters .muted { font-size: 0.9375rem; }
dl.facts { display: grid; grid-template-columns: max-content 1fr; gap: 0.25rem 1.25rem; margin: 1rem 0; }
dl.facts dt { color: var(--muted); }
dl.facts dd { margin: 0; overflow-wrap: anywhere; }
iframe.letter { inline-size: 100%; block-size: 44rem; border: 1px solid var(--hairline); background: #fff; resize: vertical; }
pre { font: 0.9375rem/1.5 ui-monospace, monospace; white-space: pre-wrap; overflow-wrap: anywhere; border-top: 1px solid var(--hairline); padding-top: 0.75rem; }
summary { cursor: pointer; min-height: 1.75rem; }
@media (max-width: 44rem) {
  .stack thead { position: absolute; inline-size: 1px; block-size: 1px; overflow: hidden; clip-path: inset(50%); }
  .stack tr { display: block; border-bottom: 1px solid var(--hairline); padding: 0.625rem 0; }
  .stack td, .stack th { display: block; border: 0; padding: 0.0625rem 0; }
  .stack .money { text-align: left; }
  .stack td .acts { margin: 0; }
  .letters a { grid-template-columns: 1fr; }
  dl.facts { grid-template-columns: 1fr; gap: 0 0; }
  dl.facts dd { margin-bottom: 0.375rem; }
  button.main { inline-size: 100%; }
}
@media (forced-colors: active) { button, .button { border: 1px solid ButtonText; clip-path: none; } }
`;

const FONTS: Record<string, string> = {
  '/__look/archivo.woff2': '@fontsource-variable/archivo/files/archivo-latin-wght-normal.woff2',
  '/__look/fraunces-500.woff2': '@fontsource/fraunces/files/fraunces-latin-500-normal.woff2',
  '/__look/fraunces-600.woff2': '@fontsource/fraunces/files/fraunces-latin-600-normal.woff2',
};

const require = createRequire(import.meta.url);

/** The style sheet and the type faces; null for any other path. */
export function lookFile(path: string): FakeResponse | null {
  const headers = { 'cache-control': 'max-age=3600' };
  if (path === '/__look/look.css') {
    return { status: 200, headers: { ...headers, 'content-type': 'text/css; charset=utf-8' }, body: CSS };
  }
  const font = FONTS[path];
  if (!font) return null;
  return {
    status: 200,
    headers: { ...headers, 'content-type': 'font/woff2' },
    body: readFileSync(require.resolve(font)),
  };
}
