// What: sends a request to a door as a contract describes it, over HTTP. Must not: judge the answer; tests do.
import type { Test } from 'supertest';
import type { ContractShape } from '@/shared/contracts/contract';
import type { Asked } from './samples';
import type { Browser } from './world';

export function pathOf(contract: ContractShape, { params = {}, query = {} }: Asked): string {
  const path = contract.path.replace(/:([A-Za-z]+)/g, (_all, name: string) => encodeURIComponent(params[name] ?? ''));
  const search = new URLSearchParams(query).toString();
  return search ? `${path}?${search}` : path;
}

/** @param text the body as text, where JSON.stringify would not say it */
export function knockAt(browser: Browser, contract: ContractShape, asked: Asked, key?: string, text?: string): Test {
  const path = pathOf(contract, asked);
  const sent = contract.method === 'GET' ? browser.get(path) : browser.post(path);
  if (key !== undefined) sent.set('idempotency-key', key);
  if (contract.method === 'GET') return sent;
  if (!contract.upload) return sent.type('application/json').send(text ?? JSON.stringify(asked.body ?? {}));
  for (const [name, value] of Object.entries(asked.body ?? {})) sent.field(name, String(value));
  return asked.file ? sent.attach('file', asked.file, 'skin.jpg') : sent;
}
