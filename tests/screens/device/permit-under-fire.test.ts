/** @jest-environment node */
/**
 * Tokens that somebody tampered with, replayed or carried to where they do not belong, given to a stimulator: each is refused with
 * its reason, and none of them changes what the stimulator does with the permit that is its own.
 */
import 'fake-indexeddb/auto';
import { CompactSign, exportJWK, generateKeyPair, type CompactJWSHeaderParameters } from 'jose';
import type { StartRefusal } from '@/components/runtime/device/stimulator';
import type { PermitClaims } from '@/shared/contracts/permit';
import { benchOf, electrodes, freshAccount, serial } from '@/tests/support/device/bench';
import {
  claimsOf,
  deviceId,
  nowSeconds,
  nowText,
  otherDeviceId,
  signer,
  type Signer,
} from '@/tests/support/device/permits';

type Key = Parameters<CompactSign['sign']>[0];

const other = '11111111-2222-4333-8444-555555555555';
const text = (value: unknown) => (typeof value === 'string' ? value : JSON.stringify(value));
const encoded = (value: unknown) => Buffer.from(text(value)).toString('base64url');
/** Signed by anybody, with any header over any payload. */
const signedBy = (key: Key, header: CompactJWSHeaderParameters, payload: unknown) =>
  new CompactSign(new TextEncoder().encode(text(payload))).setProtectedHeader(header).sign(key);

async function partsOf(token: Promise<string> | string) {
  const [head = '', body = '', signature = ''] = (await token).split('.');
  return { head, body, signature };
}
/** A good token whose payload was changed afterwards. */
async function altered(house: Signer, change: Partial<PermitClaims>) {
  const { head, signature } = await partsOf(house.sign(claimsOf()));
  return `${head}.${encoded(claimsOf(change))}.${signature}`;
}
/** A good token under another header. */
async function under(house: Signer, header: unknown) {
  const { body, signature } = await partsOf(house.sign(claimsOf()));
  return `${encoded(header)}.${body}.${signature}`;
}
const shared = (bytes: string) => new TextEncoder().encode(bytes.padEnd(64, '\0'));
const foreign = (alg = 'EdDSA') => generateKeyPair(alg, { extractable: true });

const attacks: [string, StartRefusal, (house: Signer, second: Signer) => Promise<string> | string][] = [
  // No signature, or one of another kind.
  ['alg none without a signature', 'permit_foreign', () => `${encoded({ alg: 'none' })}.${encoded(claimsOf())}.`],
  ['alg None beside a good signature', 'permit_foreign', (house) => under(house, { alg: 'None', kid: house.key.kid })],
  ['no alg at all', 'permit_unreadable', (house) => under(house, { kid: house.key.kid })],
  [
    'HS256 with the public key as the secret',
    'permit_foreign',
    ({ key }) => signedBy(shared(key.x), { alg: 'HS256', kid: key.kid }, claimsOf()),
  ],
  [
    'HS256 with the public key’s JSON as the secret',
    'permit_foreign',
    ({ key }) => signedBy(shared(JSON.stringify(key)), { alg: 'HS256', kid: key.kid }, claimsOf()),
  ],
  [
    'HS512 with the public key as the secret',
    'permit_foreign',
    ({ key }) => signedBy(shared(key.x), { alg: 'HS512', kid: key.kid }, claimsOf()),
  ],
  [
    'ES256 under the house’s key name',
    'permit_foreign',
    async ({ key }) => signedBy((await foreign('ES256')).privateKey, { alg: 'ES256', kid: key.kid }, claimsOf()),
  ],
  // Keys of somebody else.
  [
    'a foreign key under the house’s key name',
    'permit_altered',
    async ({ key }) => (await signer(key.kid)).sign(claimsOf()),
  ],
  ['a foreign key under its own name', 'permit_foreign', async () => (await signer('house-9')).sign(claimsOf())],
  [
    'a foreign key that the token brings along',
    'permit_altered',
    async ({ key }) => {
      const pair = await foreign();
      const jwk = await exportJWK(pair.publicKey);
      return signedBy(pair.privateKey, { alg: 'EdDSA', kid: key.kid, jwk }, claimsOf());
    },
  ],
  [
    'a foreign key under an address',
    'permit_altered',
    async ({ key }) =>
      signedBy(
        (await foreign()).privateKey,
        { alg: 'EdDSA', kid: key.kid, jku: 'https://keys.example/set' },
        claimsOf(),
      ),
  ],
  [
    'a key name of the house’s other key',
    'permit_altered',
    (house, second) => under(house, { alg: 'EdDSA', kid: second.key.kid }),
  ],
  ['a key name that is a path', 'permit_foreign', (house) => under(house, { alg: 'EdDSA', kid: '../../dev/null' })],
  ['a key that the house has withdrawn', 'permit_foreign', async () => (await signer('house-0')).sign(claimsOf())],
  // Good tokens that were changed.
  ['a higher current', 'permit_altered', (house) => altered(house, { intensityMicroamp: 4000 })],
  ['a longer hold', 'permit_altered', (house) => altered(house, { holdMs: 2_400_000 })],
  ['a steeper ramp', 'permit_altered', (house) => altered(house, { rampUpMs: 0 })],
  ['a later end', 'permit_altered', (house) => altered(house, { exp: nowSeconds + 86_400 })],
  ['a higher counter', 'permit_altered', (house) => altered(house, { counter: 99 })],
  ['another version', 'permit_altered', (house) => altered(house, { prescriptionVersion: 2 })],
  ['another wearer', 'permit_altered', (house) => altered(house, { participant: other })],
  [
    'other places on the head',
    'permit_altered',
    (house) =>
      altered(house, {
        montage: [
          { position: 'F4', polarity: 'anode' },
          { position: 'Fp1', polarity: 'cathode' },
        ],
      }),
  ],
  [
    'the signature of another permit',
    'permit_altered',
    async (house) => {
      const { head, body } = await partsOf(house.sign(claimsOf()));
      return `${head}.${body}.${(await partsOf(house.sign(claimsOf({ counter: 8 })))).signature}`;
    },
  ],
  [
    'one bit of the signature',
    'permit_altered',
    async (house) => {
      const { head, body, signature } = await partsOf(house.sign(claimsOf()));
      const bytes = Buffer.from(signature, 'base64url');
      bytes[10] = (bytes[10] ?? 0) ^ 1;
      return `${head}.${body}.${bytes.toString('base64url')}`;
    },
  ],
  [
    'half a signature',
    'permit_altered',
    async (house) => {
      const { head, body, signature } = await partsOf(house.sign(claimsOf()));
      return `${head}.${body}.${signature.slice(0, 43)}`;
    },
  ],
  [
    'no third part',
    'permit_unreadable',
    async (house) => (await house.sign(claimsOf())).split('.').slice(0, 2).join('.'),
  ],
  ['nothing', 'permit_unreadable', () => ''],
  // Signed by the house, for something else.
  ['ended', 'permit_expired', (house) => house.sign(claimsOf({ iat: nowSeconds - 3600, exp: nowSeconds - 1800 }))],
  [
    'ends at this instant',
    'permit_expired',
    (house) => house.sign(claimsOf({ iat: nowSeconds - 1800, exp: nowSeconds })),
  ],
  [
    'from the future',
    'permit_not_yet',
    (house) => house.sign(claimsOf({ iat: nowSeconds + 3600, exp: nowSeconds + 5400 })),
  ],
  ['another audience', 'permit_other_device', (house) => house.sign(claimsOf({ aud: 'https://clinic.example' }))],
  [
    'another stimulator',
    'permit_other_device',
    (house) => house.sign(claimsOf({ aud: otherDeviceId, device: otherDeviceId })),
  ],
  [
    'this audience but another stimulator',
    'permit_other_device',
    (house) => house.sign(claimsOf({ device: otherDeviceId })),
  ],
  ['another issuer', 'permit_foreign', async () => resigned({ ...claimsOf(), iss: 'elsewhere' })],
  ['somebody else', 'permit_other_person', (house) => house.sign(claimsOf({ participant: other }))],
  ['a counter that was used', 'permit_old', (house) => house.sign(claimsOf({ counter: 5 }))],
  ['an older counter', 'permit_old', (house) => house.sign(claimsOf({ counter: 2 }))],
  [
    'an older version of the prescription',
    'permit_older_version',
    (house) => house.sign(claimsOf({ prescriptionVersion: 2 })),
  ],
  [
    'more than the ceiling of current',
    'permit_above_ceiling',
    (house) => house.sign(claimsOf({ prescriptionVersion: 3, intensityMicroamp: 4100 })),
  ],
  [
    'more than the ceiling of time',
    'permit_above_ceiling',
    (house) => house.sign(claimsOf({ prescriptionVersion: 3, holdMs: 2_400_000 })),
  ],
  [
    'more than the ceiling of charge',
    'permit_above_ceiling',
    (house) => house.sign(claimsOf({ prescriptionVersion: 3, chargeMicrocoulomb: 7_200_001 })),
  ],
  ['a current below zero', 'permit_unreadable', (house) => house.sign(claimsOf({ intensityMicroamp: -2000 }))],
  ['a field that is not known', 'permit_unreadable', () => resigned({ ...claimsOf(), repeat: true })],
  ['no end', 'permit_foreign', () => resigned({ ...claimsOf(), exp: undefined })],
  ['two audiences', 'permit_unreadable', () => resigned({ ...claimsOf(), aud: [deviceId, otherDeviceId] })],
  ['a list for a payload', 'permit_unreadable', () => resigned([claimsOf()])],
];

/** The house's own private key, to sign what the house would never sign. */
let houseKey: Key;
const resigned = (payload: unknown) => signedBy(houseKey, { alg: 'EdDSA', kid: 'house-1' }, payload);

async function house(): Promise<Signer> {
  const pair = await foreign();
  houseKey = pair.privateKey;
  const { x = '' } = await exportJWK(pair.publicKey);
  return {
    key: { kty: 'OKP', crv: 'Ed25519', x, kid: 'house-1', alg: 'EdDSA', use: 'sig' },
    sign: (claims) => resigned(claims),
  };
}

/** Its last session was under counter 5 and version 3. */
async function usedStimulator(own: Signer, second: Signer) {
  const bench = await benchOf(freshAccount());
  const { participant: participantId } = claimsOf();
  const keys = [second.key, own.key];
  await bench.device.pair({ deviceId, serial: serial ?? '', keys, participantId, now: nowText });
  bench.device.measureContact(electrodes);
  await bench.pass(20);
  const first = { counter: 5, prescriptionVersion: 3, rampUpMs: 10_000, holdMs: 1000, rampDownMs: 10_000 };
  expect(await bench.device.start(await own.sign(claimsOf(first)))).toEqual({ started: true });
  await bench.pass(25);
  return bench;
}

it.each(attacks)('refuses %s: %s, and starts on its own permit afterwards', async (_what, why, make) => {
  const own = await house();
  const second = await signer('house-2');
  const { device } = await usedStimulator(own, second);
  expect(await device.start(await make(own, second))).toEqual({ started: false, why });
  expect(device.status().session?.snapshot.state).toBe('ended');
  expect(await device.start(await own.sign(claimsOf({ prescriptionVersion: 3 })))).toEqual({ started: true });
});

it('takes up version 1 of another course after version 3 of the last one', async () => {
  const own = await house();
  const { device } = await usedStimulator(own, await signer('house-2'));
  expect(await device.start(await own.sign(claimsOf({ course: other, prescriptionVersion: 1 })))).toEqual({
    started: true,
  });
});

it('trusts the keys that it was told last, and no other', async () => {
  const own = await house();
  const { device } = await usedStimulator(own, await signer('house-2'));
  const next = await signer('house-3');
  const permit = await next.sign(claimsOf({ prescriptionVersion: 3 }));
  expect(await device.start(permit)).toEqual({ started: false, why: 'permit_foreign' });
  await device.pair({ deviceId, serial: serial ?? '', keys: [next.key], now: nowText });
  expect(await device.start(await own.sign(claimsOf({ prescriptionVersion: 3 })))).toEqual({
    started: false,
    why: 'permit_foreign',
  });
  expect(await device.start(permit)).toEqual({ started: true });
});
