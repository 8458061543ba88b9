// Keeps the signed anchors of the audit trail outside the database too: one line an anchor at the end of a file in the data folder, with
// the public key beside it. Whoever copies that file elsewhere can show a cut tail. Only ever adds lines.

import { open, readFile } from 'node:fs/promises';
import path from 'node:path';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { listAnchors, type Anchor } from '@/db/queries/audit-anchor';
import { listSigningKeys } from '@/db/queries/permit';

export const anchorFileName = 'audit-anchors.jsonl';
const pageLength = 20;

export type KeptAnchor = Anchor & { publicX: string };

const Line = z.object({
  number: z.number().int(),
  at: z.string(),
  previousHash: z.string(),
  hash: z.string(),
  kid: z.string(),
  publicX: z.string(),
  token: z.string(),
  heads: z.array(z.object({ chain: z.string(), sequence: z.number().int(), hash: z.string() })),
});

/** What the file holds; null where there is none. A line that cannot be read counts as no anchor and is told of by its place. */
export async function readKeptAnchors(file: string): Promise<{ anchors: KeptAnchor[]; unreadable: number[] } | null> {
  const text = await readFile(file, 'utf8').catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return null;
    throw error;
  });
  if (text === null) return null;
  const anchors: KeptAnchor[] = [];
  const unreadable: number[] = [];
  for (const [index, line] of text.split('\n').entries()) {
    if (line === '') continue;
    const parsed = Line.safeParse(jsonOf(line));
    if (parsed.success) anchors.push(parsed.data);
    else unreadable.push(index + 1);
  }
  return { anchors, unreadable };
}

function jsonOf(line: string): unknown {
  try {
    return JSON.parse(line);
  } catch {
    return null;
  }
}

/** Adds what the file has not yet; asked after each run of the jobs, and costs one small query when there is nothing to add. */
export function anchorKeeper(db: Db, folder: string): () => Promise<void> {
  const file = path.join(folder, anchorFileName);
  let last: number | undefined;
  return async () => {
    last ??= Math.max(0, ...((await readKeptAnchors(file))?.anchors.map(({ number }) => number) ?? []));
    for (;;) {
      const anchors = await listAnchors(db, last, pageLength);
      if (anchors.length === 0) return;
      const keys = new Map((await listSigningKeys(db)).map(({ kid, publicX }) => [kid, publicX]));
      const lines = anchors.map((anchor) => JSON.stringify({ ...anchor, publicX: keys.get(anchor.kid) ?? '' }));
      await addLines(file, lines);
      last = Math.max(last, ...anchors.map(({ number }) => number));
    }
  };
}

/** On the disk before anybody counts on it. */
async function addLines(file: string, lines: readonly string[]): Promise<void> {
  const handle = await open(file, 'a', 0o600);
  try {
    await handle.write(`${lines.join('\n')}\n`);
    await handle.sync();
  } finally {
    await handle.close();
  }
}
