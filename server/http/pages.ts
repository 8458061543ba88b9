// Serves the exported pages: compressed once at the build, kept for ever where the name has a hash. Knows no person.

import { existsSync, statSync } from 'node:fs';
import path from 'node:path';
import express, { Router, type Request, type Response } from 'express';

const yearSeconds = 31_536_000;
const types: Record<string, string> = {
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.html': 'text/html; charset=utf-8',
  '.json': 'application/json; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.ttf': 'font/ttf',
  '.txt': 'text/plain; charset=utf-8',
  '.webmanifest': 'application/manifest+json',
};
const encodings = [
  { name: 'br', ending: '.br' },
  { name: 'gzip', ending: '.gz' },
] as const;

export function pages(folder: string): Router {
  const router = Router();
  router.use((request, response, next) => {
    if (request.method !== 'GET' && request.method !== 'HEAD') return next();
    response.setHeader('Vary', 'Accept-Encoding');
    if (!sendCompressed(folder, request, response)) next();
  });
  router.use(
    express.static(folder, {
      index: false,
      redirect: false,
      dotfiles: 'ignore',
      setHeaders: (response, file) => void response.setHeader('Cache-Control', keepFor(file)),
    }),
  );
  // A page of the app has no file of its own. A missing file must stay missing: a browser that gets HTML for a script says so loudly.
  router.get('/{*rest}', (request, response, next) => {
    if (/\.|%/.test(request.path) || !request.accepts('html')) return next();
    const shell = path.join(folder, 'index.html');
    if (!existsSync(shell)) return next();
    request.url = '/index.html';
    if (!sendCompressed(folder, request, response))
      response
        .setHeader('Cache-Control', 'no-cache')
        .type('html')
        .sendFile('index.html', { root: folder, cacheControl: false });
  });
  return router;
}

function keepFor(file: string): string {
  return file.includes(`${path.sep}_expo${path.sep}static${path.sep}`)
    ? `public, max-age=${yearSeconds}, immutable`
    : 'no-cache';
}

/** True when the file lies there compressed in a way that the browser takes. */
function sendCompressed(folder: string, request: Request, response: Response): boolean {
  const file = fileOf(folder, request.path);
  const type = file ? types[path.extname(file)] : undefined;
  if (!file || !type) return false;
  for (const { name, ending } of encodings) {
    if (!request.acceptsEncodings(name) || !isFile(`${file}${ending}`) || !isFile(file)) continue;
    response
      .setHeader('Content-Type', type)
      .setHeader('Content-Encoding', name)
      .setHeader('Cache-Control', keepFor(file));
    response.sendFile(path.relative(folder, `${file}${ending}`), { root: folder, cacheControl: false });
    return true;
  }
  return false;
}

/** The file of an address; null for whatever would leave the folder or begins with a dot. */
function fileOf(folder: string, address: string): string | null {
  try {
    const file = path.join(folder, decodeURIComponent(address));
    const inside = path.relative(folder, file);
    return inside === '' || inside.split(path.sep).some((part) => part.startsWith('.')) || inside.includes('\u0000')
      ? null
      : file;
  } catch {
    return null;
  }
}

function isFile(file: string): boolean {
  return statSync(file, { throwIfNoEntry: false })?.isFile() === true;
}
