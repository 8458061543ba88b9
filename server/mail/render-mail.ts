// From an outbox row to a mail: subject, text, simple HTML without pictures from elsewhere. Words come from locales/; none names a
// treatment, a dose or a condition.

import type { OutboxRow } from '@/db/queries/house';
import { paragraphs, sentence, type Facts } from '@/server/words';

export interface Mail {
  subject: string;
  text: string;
  html: string;
}

export function renderMail(row: OutboxRow, baseUrl: string): Mail {
  const facts = factsOf(row.facts);
  const { language, kind } = row;
  const name = textOf(facts.name);
  const link = addressOf(facts.path, baseUrl);
  const stopLink = addressOf(facts.stopPath, baseUrl);
  const say = (key: string) => sentence(`mail:${key}`, facts, language);
  const greeting = name ? say('greeting') : say('greetingNobody');
  const body = paragraphs(`mail:${kind}.body`, facts, language);
  const button = say(`${kind}.button`);
  const text = [
    greeting,
    ...body,
    ...(link ? [`${button}: ${link}`] : []),
    ...(stopLink ? [`${say('stop')} ${stopLink}`] : []),
    say('automatic'),
    say('notForYou'),
  ];
  const html = [
    p(greeting),
    ...body.map(p),
    ...(link ? [`<p><a href="${escaped(link)}">${escaped(button)}</a></p>`, p(say('linkAlone')), p(link)] : []),
    ...(stopLink
      ? [`<p>${escaped(say('stop'))} <a href="${escaped(stopLink)}">${escaped(say('stopButton'))}</a></p>`]
      : []),
    `<p><small>${escaped(say('automatic'))} ${escaped(say('notForYou'))}</small></p>`,
  ];
  const subject = say(`${kind}.subject`).replace(/\s+/g, ' ').trim();
  return {
    subject,
    text: `${text.join('\n\n')}\n`,
    html: `<!doctype html><html lang="${escaped(language)}"><head><meta charset="utf-8"><title>${escaped(subject)}</title></head><body>${html.join('')}</body></html>`,
  };
}

function factsOf(kept: unknown): Facts {
  if (typeof kept !== 'object' || kept === null) return {};
  return Object.fromEntries(
    Object.entries(kept).filter(([, value]) => ['string', 'number', 'boolean'].includes(typeof value)),
  );
}

function textOf(fact: Facts[string]): string {
  return fact === undefined || fact === null ? '' : String(fact);
}

/** Only paths of our own become links: a fact cannot lead anybody elsewhere. */
function addressOf(fact: Facts[string], baseUrl: string): string | null {
  const path = textOf(fact);
  return path.startsWith('/') && !path.startsWith('//') ? `${baseUrl}${path}` : null;
}

const entities: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };

function escaped(text: string): string {
  return text.replace(/[&<>"']/g, (character) => entities[character] ?? '');
}

function p(text: string): string {
  return `<p>${escaped(text)}</p>`;
}
