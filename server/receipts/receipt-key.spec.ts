import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createPublicKey, generateKeyPairSync, verify } from 'node:crypto';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { receiptKind, signedForm, type ReceiptFacts } from '@shared/receipts';
import { isSignedHere, openReceiptKey, publicKeyOfReceipts, receiptKeyName, signReceipt } from './receipt-key';

const facts: ReceiptFacts = {
  kind: receiptKind,
  set: '5b3f4c52-8a51-4b53-9c6e-0d6b9a4a3f10',
  script: 'K7QF',
  submission: 2,
  time: '2026-11-24T14:36:00.000Z',
  digest: 'ab'.repeat(32),
};

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'halfsilver-'));
});
afterEach(() => {
  rmSync(folder, { recursive: true });
});

describe('the key of receipts', () => {
  it('is made once, for the server’s account alone', () => {
    openReceiptKey(folder);
    const path = join(folder, receiptKeyName);
    expect(statSync(path).mode & 0o777).toBe(0o600);
    const [made, signed] = [readFileSync(path, 'utf8'), signReceipt(facts)];
    openReceiptKey(folder);
    expect(readFileSync(path, 'utf8')).toBe(made);
    expect(signReceipt(facts)).toEqual(signed);
  });

  it('refuses a file that is no Ed25519 key', () => {
    const other = generateKeyPairSync('ec', { namedCurve: 'P-256' }).privateKey;
    writeFileSync(join(folder, receiptKeyName), other.export({ type: 'pkcs8', format: 'pem' }));
    expect(() => {
      openReceiptKey(folder);
    }).toThrow('is not an Ed25519 key');
  });

  it('signs what anybody can verify with the public key alone', () => {
    openReceiptKey(folder);
    const receipt = signReceipt(facts);
    const key = createPublicKey({ key: Buffer.from(receipt.publicKey, 'base64'), format: 'der', type: 'spki' });
    const signature = Buffer.from(receipt.signature, 'base64');
    expect(verify(null, Buffer.from(signedForm(receipt)), key, signature)).toBe(true);
    expect(createPublicKey(publicKeyOfReceipts().pem).equals(key)).toBe(true);
  });

  it.each([
    ['time', { time: '2026-11-24T14:35:59.999Z' }],
    ['digest', { digest: 'cd'.repeat(32) }],
    ['script', { script: 'K7QG' }],
    ['submission', { submission: 1 }],
    ['signature', { signature: 'AAAA' }],
  ])('does not know a receipt whose %s was changed', (_, change) => {
    openReceiptKey(folder);
    expect(isSignedHere(signReceipt(facts))).toBe(true);
    expect(isSignedHere({ ...signReceipt(facts), ...change })).toBe(false);
  });

  it('does not know a receipt that was signed with another key', () => {
    openReceiptKey(folder);
    const receipt = signReceipt(facts);
    openReceiptKey(mkdtempSync(join(folder, 'other-')));
    expect(isSignedHere(receipt)).toBe(false);
  });
});
