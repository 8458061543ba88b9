// What: golden numbers: dose arithmetic by hand-worked cases, HOTP by RFC 4226 appendix D, Ed25519 by RFC 8032 and RFC 8037.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'golden numbers: dose arithmetic, HOTP (RFC 4226), Ed25519 (RFC 8032)';
const files = ['published-cases', 'signatures'].map((name) => `tests/rules/${name}.test.ts`);

export default ({ seed }) => wholeSuite({ project: 'rules', files, seed });
