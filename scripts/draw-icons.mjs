// What: draws the app's icons as PNG from the two SVG files in assets/, after one of them was changed. Run by hand:
// `node scripts/draw-icons.mjs`. Must not: be part of the build; the drawn files are committed.
import { copyFile, readFile } from 'node:fs/promises';
import path from 'node:path';
import sharp from 'sharp';

const root = path.resolve(import.meta.dirname, '..');
const asset = (name) => path.join(root, 'assets', name);
const icon = (name) => path.join(root, 'public', 'icons', name);

const drawings = [
  { from: 'icon.svg', to: 'icon-180.png', side: 180 },
  { from: 'icon.svg', to: 'icon-192.png', side: 192 },
  { from: 'icon.svg', to: 'icon-512.png', side: 512 },
  { from: 'icon-maskable.svg', to: 'icon-maskable-512.png', side: 512 },
];

for (const { from, to, side } of drawings) {
  const svg = await readFile(asset(from));
  // The density makes the drawing at its final size; scaling a small picture up would blur its edges.
  await sharp(svg, { density: (72 * side) / 64 })
    .resize(side, side)
    .png()
    .toFile(icon(to));
}
await copyFile(asset('icon.svg'), icon('icon.svg'));
