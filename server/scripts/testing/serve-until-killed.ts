import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { createHarness } from '../../testing/harness';
import { beginScript } from '../begin-script';
import { savedParts } from '../saved-answers';
import { buildOpenSet } from './build-set';

/*
 * A server on a database file with one open sheet, for the test that kills it. It prints one line: where it listens, the
 * student's cookie and the answer to be saved.
 */

const [, , file = ''] = process.argv;
const harness = createHarness(file);
const { setId, student } = await buildOpenSet(harness);
const script = beginScript(harness.db, { id: setId }, student.membershipId, harness.clock.now());
const [part] = savedParts(harness.db, script);
const cookie = (await harness.sessions.begin(student.id)).split(';')[0];
const server = createServer(harness.app);
server.listen(0, '127.0.0.1', () => {
  const { port } = server.address() as AddressInfo;
  process.stdout.write(`${JSON.stringify({ port, cookie, answerId: part?.answer.id })}\n`);
});
