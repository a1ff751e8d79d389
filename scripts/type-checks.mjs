import { join } from 'node:path';
import { root } from './root.mjs';

const tsc = join(root, 'node_modules', 'typescript', 'bin', 'tsc');

/**
 * What Node.js is called with to check the types outside templates; those are checked when the client is built.
 *
 * @type {readonly (readonly string[])[]}
 */
export const typeChecks = ['tsconfig.server.json', 'tsconfig.spec.json', 'tsconfig.e2e.json'].map((project) => [
  tsc,
  ...['-p', project, '--noEmit', '--pretty', 'false'],
]);
