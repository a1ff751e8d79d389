import { createPrivateKey, createPublicKey, generateKeyPairSync, sign, verify, type KeyObject } from 'node:crypto';
import { chmodSync, existsSync, linkSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { signedForm, type ReceiptFacts, type SignedReceipt } from '@shared/receipts';
import { newId } from '../http/new-id';

/** Where the private key lies in `DATA_DIR`: a file of its own, since who copies the database must not get it. */
export const receiptKeyName = 'receipt-key.pem';

interface ReceiptKey {
  readonly privateKey: KeyObject;
  readonly publicKey: KeyObject;
}

/** An installation has one key. Until a folder is named it is made in memory, as tests want it. */
let present: ReceiptKey | null = null;

/**
 * Takes the key in a folder; makes it, once, where there is none. Only the account that the server runs under can read it.
 *
 * @throws Error where the file cannot be read, or is no Ed25519 key
 */
export function openReceiptKey(folder: string): void {
  const path = join(folder, receiptKeyName);
  if (!existsSync(path)) makeKeyFile(path);
  // A copy or a backup may have loosened it.
  chmodSync(path, 0o600);
  const privateKey = createPrivateKey(readFileSync(path));
  if (privateKey.asymmetricKeyType !== 'ed25519') throw new Error(`${path} is not an Ed25519 key.`);
  present = { privateKey, publicKey: createPublicKey(privateKey) };
}

/** Written beside and linked into place: it is there whole or not at all, and the first of two processes wins. */
function makeKeyFile(path: string): void {
  const { privateKey } = generateKeyPairSync('ed25519');
  const beside = `${path}.${newId()}`;
  writeFileSync(beside, privateKey.export({ type: 'pkcs8', format: 'pem' }), { mode: 0o600, flag: 'wx', flush: true });
  try {
    linkSync(beside, path);
  } catch (error) {
    if (!existsSync(path)) throw error;
  } finally {
    rmSync(beside);
  }
}

function keyOfThisServer(): ReceiptKey {
  present ??= generateKeyPairSync('ed25519');
  return present;
}

/** Facts with the server's signature. Ed25519 is deterministic (RFC 8032): the same facts have the same signature. */
export function signReceipt(facts: ReceiptFacts): SignedReceipt {
  const signature = sign(null, Buffer.from(signedForm(facts), 'utf8'), keyOfThisServer().privateKey);
  return { ...facts, signature: signature.toString('base64'), publicKey: publicKeyOfReceipts().publicKey };
}

/** Whether a signature over facts is this server's. */
export function isSignedHere(receipt: Omit<SignedReceipt, 'publicKey'>): boolean {
  const text = Buffer.from(signedForm(receipt), 'utf8');
  return verify(null, text, keyOfThisServer().publicKey, Buffer.from(receipt.signature, 'base64'));
}

/** The public key, as receipts carry it and as PEM. */
export function publicKeyOfReceipts(): { readonly publicKey: string; readonly pem: string } {
  const { publicKey } = keyOfThisServer();
  return {
    publicKey: publicKey.export({ type: 'spki', format: 'der' }).toString('base64'),
    pem: publicKey.export({ type: 'spki', format: 'pem' }).toString(),
  };
}
