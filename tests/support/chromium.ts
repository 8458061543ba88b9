// What: opens the system's Chromium for the walks. Must not: download a browser; `npm test` installs Debian's where it is missing.
import { existsSync } from 'node:fs';
import path from 'node:path';
import { chromium, type Browser } from 'playwright-core';

function find(): string {
  const folders = (process.env.PATH ?? '').split(path.delimiter);
  const files = ['chromium', 'chromium-browser', 'google-chrome'].flatMap((name) =>
    folders.map((folder) => path.join(folder, name)),
  );
  const found = files.find((file) => existsSync(file));
  if (!found) throw new Error('Chromium is not on the PATH. `npm test -- browser` installs it when it may.');
  return found;
}

export function openChromium(): Promise<Browser> {
  // Chromium refuses its sandbox to root; the pages it opens here are our own.
  return chromium.launch({ executablePath: find(), args: process.getuid?.() === 0 ? ['--no-sandbox'] : [] });
}
