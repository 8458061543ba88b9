// Reads what was sent: JSON up to 1 MB, or a form with one file up to 8 MB. Refuses what it cannot read; judges no field.

import express, { type Request, type RequestHandler, type Response } from 'express';
import multer, { MulterError } from 'multer';
import type { UploadedFile } from '@/server/action';
import type { BareProblem } from './problem';

/** Own choices: the largest batch of events is about 300 kB; 8 MB is a phone's photo. */
const jsonBytesMost = 1_000_000;
const fileBytesMost = 8_000_000;
const fieldBytesMost = 10_000;
const fieldsMost = 10;

export type Sent = { body: unknown; file: UploadedFile | null } | { problem: BareProblem };

const parseJson = express.json({ limit: jsonBytesMost, strict: false, type: 'application/json' });
const parseForm = multer({
  storage: multer.memoryStorage(),
  limits: { fileSize: fileBytesMost, files: 1, fields: fieldsMost, fieldSize: fieldBytesMost },
}).single('file');

/** Runs a middleware and waits for it; what it complains about is thrown. */
function ran(handler: RequestHandler, request: Request, response: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    void handler(request, response, (error?: unknown) =>
      error ? reject(error instanceof Error ? error : new Error('unreadable')) : resolve(),
    );
  });
}

function hasBody({ headers }: Request): boolean {
  return headers['transfer-encoding'] !== undefined || Number(headers['content-length'] ?? 0) > 0;
}

export async function readJson(request: Request, response: Response): Promise<Sent> {
  if (!hasBody(request)) return { body: {}, file: null };
  if (!request.is('application/json')) return { problem: { status: 415, code: 'content_type.json' } };
  try {
    await ran(parseJson, request, response);
    const body: unknown = request.body;
    return { body, file: null };
  } catch (error) {
    return { problem: jsonProblem(error) };
  }
}

function jsonProblem(error: unknown): BareProblem {
  const type = typeof error === 'object' && error !== null && 'type' in error ? String(error.type) : '';
  if (type === 'entity.too.large')
    return { status: 413, code: 'body.too_large', facts: { megabytes: jsonBytesMost / 1_000_000 } };
  if (type === 'encoding.unsupported' || type === 'charset.unsupported')
    return { status: 415, code: 'content_type.json' };
  return { status: 400, code: 'body.malformed' };
}

export async function readForm(request: Request, response: Response): Promise<Sent> {
  if (!request.is('multipart/form-data')) return { problem: { status: 415, code: 'content_type.form' } };
  try {
    await ran(parseForm, request, response);
    const { file } = request;
    const fields: unknown = request.body;
    const body = { ...(typeof fields === 'object' ? fields : {}) };
    if (!file) return { problem: { status: 422, code: 'invalid', fields: [{ path: 'file', code: 'missing' }] } };
    return { body, file: { bytes: new Uint8Array(file.buffer), claimedType: file.mimetype } };
  } catch (error) {
    return { problem: formProblem(error) };
  }
}

function formProblem(error: unknown): BareProblem {
  if (!(error instanceof MulterError)) return { status: 400, code: 'body.malformed_form' };
  if (error.code === 'LIMIT_FILE_SIZE')
    return { status: 413, code: 'file.too_large', facts: { megabytes: fileBytesMost / 1_000_000 } };
  if (error.code === 'LIMIT_UNEXPECTED_FILE')
    return { status: 422, code: 'invalid', fields: [{ path: error.field ?? 'file', code: 'unknown_field' }] };
  const field = error.code === 'LIMIT_FILE_COUNT' ? 'file' : '';
  return { status: 422, code: 'invalid', fields: [{ path: error.field ?? field, code: 'not_allowed' }] };
}
