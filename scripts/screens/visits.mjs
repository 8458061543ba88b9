// What: which screens are pictured, as whom, and what is done there first. The addresses come from shared/contracts/screens.ts,
// so a new screen is pictured without a line here; moments in between (a question answered, a dialog open) stand in moments.mjs.
// Must not: know ids; they are asked of the demo that is running.
import path from 'node:path';
import { build } from 'esbuild';
import { root } from '../ground/paths.mjs';
import { moments } from './moments.mjs';

async function readScreens() {
  const { outputFiles } = await build({
    entryPoints: [path.join(root, 'shared', 'contracts', 'screens.ts')],
    bundle: true,
    write: false,
    format: 'esm',
    platform: 'neutral',
  });
  const source = Buffer.from(outputFiles[0].contents).toString('base64');
  return (await import(`data:text/javascript;base64,${source}`)).screens;
}

export async function ask(page, address) {
  const answer = await page.request.get(address);
  return answer.ok() ? answer.json() : undefined;
}

/** The fullest example of each kind of thing, so that a picture shows what the screen can do. */
const examples = {
  participantId: async (page, role) => {
    if (role === 'caregiver') return (await ask(page, '/api/shared'))?.items?.[0]?.participantId;
    const rows = (await ask(page, '/api/participants?limit=100'))?.items ?? [];
    return rows.sort((a, b) => b.marks.length + b.holds * 10 - a.marks.length - a.holds * 10)[0]?.id;
  },
  sessionId: async (page, role, place) => {
    if (role === 'participant') return (await ask(page, '/api/diary'))?.items?.[0]?.sessionId;
    const person = place.split('/')[2];
    return (await ask(page, `/api/participants/${person}/timeline?limit=100`))?.items?.find((one) => one.kind === 'session')?.sessionId;
  },
  itemId: async (page) => (await ask(page, '/api/worklist?limit=100'))?.items?.[0]?.id,
};

function filled(address, role) {
  const names = [...address.matchAll(/\[(\w+)\]/g)].map(([, name]) => name);
  if (names.length === 0) return address;
  return async (page) => {
    let place = address;
    for (const name of names) {
      const value = await examples[name]?.(page, role, place);
      if (value === undefined) return undefined;
      place = place.replace(`[${name}]`, value);
    }
    return place;
  };
}

export async function allVisits(accounts) {
  const visits = [];
  for (const { path: address, who } of await readScreens()) {
    if (who.includes('anyone')) visits.push({ role: 'anyone', name: address, path: address });
    for (const role of who.includes('anyone') ? [] : who) {
      const account =
        accounts.find((one) => one.role === role && one.state === 'ready') ?? accounts.find((one) => one.role === role);
      if (account) visits.push({ role, account, name: address, path: filled(address, role) });
    }
  }
  return [...visits, ...moments(accounts)];
}
