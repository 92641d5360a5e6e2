import { json, type FakeResponse } from '../web/message';
import { html, moment, page, type Html } from '../web/page';
import { bareAddress } from './mail-params';
import type { Mail, World } from './world';

const NAME = 'Inbox of this machine';
const STAND_IN = 'Local stand-in for Resend. No mail leaves this machine.';
const SHOWN = 50;

/** All mails, newest first, or those to an address that contains what was searched for. */
export function inboxPage(world: World, query: URLSearchParams): FakeResponse {
  const wanted = (query.get('to') ?? '').trim().toLowerCase();
  const from = Math.max(0, Number.parseInt(query.get('from') ?? '0', 10) || 0);
  const mails = world.tables.mails
    .newest()
    .filter((mail) => !wanted || everybody(mail).some((one) => one.includes(wanted)));
  const older = mails.length > from + SHOWN;
  const olderQuery = new URLSearchParams({ ...(wanted && { to: wanted }), from: String(from + SHOWN) });
  return page({
    title: NAME,
    name: NAME,
    standIn: STAND_IN,
    body: html` <h1>Mails sent from here</h1>
      <form class="search" method="get" action="/">
        <label
          ><span class="label">Sent to</span>
          <input type="search" name="to" value="${wanted}" autocomplete="off" placeholder="name@example.org" /></label
        ><button>Show</button> ${wanted && html`<a href="/">Show all</a>`}
      </form>
      <p class="muted">
        ${count(mails.length)}${wanted && ` to addresses with "${wanted}"`}${mails.length > 1 && ', newest first'}.
        Addresses that begin with "bounce" come back.
      </p>
      ${
        mails.length > 0 &&
        html`<ul class="letters">
          ${mails.slice(from, from + SHOWN).map(row)}
        </ul>`
      }
      <div class="acts">
        ${from > 0 && html`<a href="/?${new URLSearchParams(wanted ? { to: wanted } : {}).toString()}">Newest</a>`}
        ${older && html`<a href="/?${olderQuery.toString()}">Older mails</a>`}
      </div>`,
  });
}

function count(mails: number): string {
  return mails === 0 ? 'No mails yet' : mails === 1 ? '1 mail' : `${mails} mails`;
}

function row(mail: Mail): Html {
  return html`<li>
    <a href="/mail/${mail.id}"
      ><span>${mail.to.join(', ')}</span>
      <span class="subject">${mail.subject}</span>
      <span class="muted">${state(mail)} ${moment(new Date(mail.created_at))}</span></a
    >
  </li>`;
}

function state(mail: Mail): Html {
  const bad = ['bounced', 'complained', 'suppressed'].includes(mail.last_event);
  return html`<span class="state ${bad ? 'bad' : mail.last_event === 'delivered' ? 'good' : ''}"
    >${mail.last_event}</span
  >`;
}

/** One mail: its HTML in a frame that runs no script, its plain text, its head. */
export function mailPage(world: World, id: string): FakeResponse {
  const mail = world.tables.mails.get(id);
  if (!mail) {
    const body = html`<h1>There is no such mail</h1>
      <p>The inbox may have been emptied since.</p>
      <p><a href="/">All mails</a></p>`;
    return page({ status: 404, title: 'No such mail', name: NAME, standIn: STAND_IN, body });
  }
  return page({
    title: mail.subject,
    name: NAME,
    standIn: STAND_IN,
    showsMail: true,
    body: html` <p><a href="/">All mails</a></p>
      <h1>${mail.subject}</h1>
      <dl class="facts">
        ${fact('To', mail.to.join(', '))}${fact('From', mail.from)}${fact('Copy', (mail.cc ?? []).join(', '))}${fact('Hidden copy', (mail.bcc ?? []).join(', '))}${fact('Answers go to', (mail.reply_to ?? []).join(', '))}${fact('Sent', moment(new Date(mail.created_at)))}
        <dt>State</dt>
        <dd>${state(mail)}</dd>
        ${mail.attachments.map((file) => fact('Attached', `${file.filename}, ${Math.ceil(file.bytes / 1024)} kB`))}
      </dl>
      ${
        mail.html !== null &&
        html`<h2>As HTML</h2>
          <iframe
            class="letter"
            title="The mail as HTML"
            sandbox="allow-popups allow-popups-to-escape-sandbox"
            srcdoc="${framed(mail, mail.html)}"
          ></iframe>`
      }
      <h2>As plain text</h2>
      ${mail.text === null ? html`<p class="muted">The mail has no plain text.</p>` : html`<pre>${mail.text}</pre>`}
      <h2>Head</h2>
      <dl class="facts">
        ${fact('Message id', mail.message_id)}${Object.entries(mail.headers).map(([name, value]) => fact(name, value))}${(mail.tags ?? []).map((tag) => fact(`Tag ${tag.name}`, tag.value))}${mail.history.map((step) => fact(step.event, moment(new Date(step.at))))}
      </dl>`,
  });
}

function fact(name: string, value: string): Html {
  return value === ''
    ? html``
    : html`<dt>${name}</dt>
        <dd>${value}</dd>`;
}

/** Links of the mail open in a new tab, outside the frame that runs no script; enclosed pictures stand in their places. */
function framed(mail: Mail, mailHtml: string): string {
  const shown = mail.attachments.reduce(
    (text, { inline }) => (inline ? text.replaceAll(`cid:${inline.contentId}`, inline.dataUri) : text),
    mailHtml,
  );
  return `<base target="_blank">${shown}`;
}

/** Mails as JSON, newest first; `to` picks those to exactly this address. */
export function inboxJson(world: World, query: URLSearchParams): FakeResponse {
  const to = query.get('to')?.trim().toLowerCase();
  return json(
    200,
    world.tables.mails
      .newest()
      .filter((mail) => !to || everybody(mail).includes(to))
      .map((mail) => ({ ...mail, attachments: mail.attachments.map(({ filename, bytes }) => ({ filename, bytes })) })),
  );
}

function everybody(mail: Mail): string[] {
  return [...mail.to, ...(mail.cc ?? []), ...(mail.bcc ?? [])].map((one) => (bareAddress(one) ?? one).toLowerCase());
}
