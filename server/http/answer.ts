// Sends an answer after checking it by its contract: an extra field is a fault here, not a leak there.

import type { Response } from 'express';
import { z } from 'zod';
import type { ContractShape } from '@/shared/contracts/contract';

/** An answer that its contract does not allow. Carries where, never what. */
export class AnswerFault extends Error {}

const RawAnswer = z.object({ type: z.string(), bytes: z.instanceof(Uint8Array) });
const HealthAnswer = z.object({ status: z.string() });

export function sendAnswer(contract: ContractShape, answer: unknown, response: Response): void {
  const parsed = contract.answer.safeParse(answer);
  if (!parsed.success) {
    const where = parsed.error.issues.map((issue) => `${issue.path.join('.')} ${issue.code}`).join(', ');
    throw new AnswerFault(`The answer of ${contract.name} does not fit its contract: ${where}`);
  }
  if (contract.raw) return sendBytes(contract, RawAnswer.parse(parsed.data), response);
  const isUnwell = contract.health && HealthAnswer.parse(parsed.data).status !== 'ok';
  response.status(isUnwell ? 503 : (contract.status ?? 200)).json(parsed.data);
}

const endings: Record<string, string> = {
  'text/csv': 'csv',
  'application/json': 'json',
  'image/jpeg': 'jpg',
  'application/pdf': 'pdf',
};

/** Somebody else's bytes are shown, never run: no type guessing, no scripts, an empty origin. */
function sendBytes(contract: ContractShape, { type, bytes }: z.infer<typeof RawAnswer>, response: Response): void {
  const name = `rampwell-${contract.name.split('.')[1] ?? 'file'}.${endings[type] ?? 'bin'}`;
  const isPicture = type.startsWith('image/');
  response
    .status(contract.status ?? 200)
    .setHeader('Content-Type', isPicture ? type : `${type}; charset=utf-8`)
    .setHeader('Content-Disposition', `${isPicture ? 'inline' : 'attachment'}; filename="${name}"`)
    .setHeader('Content-Security-Policy', "default-src 'none'; sandbox")
    .end(Buffer.from(bytes));
}
