// From an uploaded file to a clean JPEG. Its name and claimed type are never trusted; metadata (place, time, camera) does not survive.

import sharp from 'sharp';
import type { refuse, UploadedFile } from '@/server/action';
import { photoLimits } from '@/shared/rules/house-limits';

type Status = NonNullable<Parameters<typeof refuse>[1]>['status'];
type Picture =
  | { isReadable: true; jpeg: Uint8Array; width: number; height: number }
  | { isReadable: false; code: string; status: Status };

const notAllowed: Picture = { isReadable: false, code: 'photo.type_not_allowed', status: 415 };
const unreadable: Picture = { isReadable: false, code: 'photo.unreadable', status: 415 };
const tooLarge: Picture = { isReadable: false, code: 'photo.too_large', status: 413 };

/** JPEG, PNG or WebP by its first bytes: nothing else reaches the library, which would read a dozen kinds more. */
function hasAllowedStart(bytes: Uint8Array): boolean {
  const start = Buffer.from(bytes.subarray(0, photoLimits.signatureBytes)).toString('latin1');
  return (
    start.startsWith('\u00ff\u00d8\u00ff') ||
    start.startsWith('\u0089PNG\r\n') ||
    (start.startsWith('RIFF') && start.endsWith('WEBP'))
  );
}

export async function readPicture(file: UploadedFile | null): Promise<Picture> {
  if (file === null || !hasAllowedStart(file.bytes)) return notAllowed;
  if (file.bytes.length > photoLimits.mostBytes) return tooLarge;
  const { longestSidePixels, mostPixels, jpegQuality } = photoLimits;
  try {
    const { width, height } = await sharp(file.bytes, { limitInputPixels: false }).metadata();
    if (width * height > mostPixels) return tooLarge;
    const { data, info } = await sharp(file.bytes, { limitInputPixels: mostPixels, failOn: 'error' })
      .rotate()
      .resize({ width: longestSidePixels, height: longestSidePixels, fit: 'inside', withoutEnlargement: true })
      .jpeg({ quality: jpegQuality })
      .toBuffer({ resolveWithObject: true });
    return { isReadable: true, jpeg: data, width: info.width, height: info.height };
  } catch {
    // Begins like a picture and is none: cut off, or never one.
    return unreadable;
  }
}
