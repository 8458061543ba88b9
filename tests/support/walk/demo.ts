// What: the demo's doors as the walks use them: the mailbox and the clock. Must not: reach round the doors into the database.
import { setTimeout as pause } from 'node:timers/promises';
import { z } from 'zod';
import { addDays, instantOf, localMoment } from '@/shared/values/zone';

const Mail = z.object({ id: z.string(), to: z.string(), subject: z.string(), text: z.string(), html: z.string() });
export type Mail = z.infer<typeof Mail>;
const Moved = z.object({ now: z.string() });

export async function mailsTo(url: string, address: string): Promise<Mail[]> {
  const answer = await fetch(`${url}/api/demo/mail?to=${encodeURIComponent(address)}`);
  return z.array(Mail).parse(await answer.json());
}

/** The newest mail to an address with this subject; looks until it is there, since mails go out after the answer. */
export async function mailTo(url: string, address: string, subject: string): Promise<Mail> {
  const deadline = performance.now() + 20_000;
  for (;;) {
    const mails = await mailsTo(url, address);
    const found = mails.find((mail) => mail.subject === subject);
    if (found) return found;
    if (performance.now() > deadline)
      throw new Error(`No mail "${subject}" to ${address}, only: ${mails.map((mail) => mail.subject).join(', ')}`);
    await pause(100);
  }
}

/** The address in a mail's text that leads to this page. */
export function linkIn(mail: Mail, page: string): string {
  const links = mail.text.match(/https?:\/\/\S+/g) ?? [];
  const found = links.find((link) => new URL(link).pathname === page);
  if (!found) throw new Error(`No link to ${page} in the mail "${mail.subject}": ${links.join(' ')}`);
  return found;
}

export async function advance(url: string, seconds: number): Promise<string> {
  const answer = await fetch(`${url}/api/demo/clock`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: url },
    body: JSON.stringify({ advanceSeconds: seconds }),
  });
  if (answer.status !== 200) throw new Error(`The clock did not move: ${answer.status} ${await answer.text()}`);
  return Moved.parse(await answer.json()).now;
}

/** Moves the clock on to a time of the day in a zone: of that day if it lies ahead, plus whole days. */
export async function advanceTo(url: string, time: string, zone: string, daysOn = 0): Promise<string> {
  const now = Date.parse(await advance(url, 0));
  const today = localMoment(now, zone);
  const first = today.time < time ? today.date : addDays(today.date, 1);
  const target = instantOf(addDays(first, daysOn), time, zone);
  return advance(url, Math.ceil((target - now) / 1000));
}
