// `npm run types`: checks the types of everything, templates included.
import { join } from 'node:path';
import { root } from './root.mjs';
import { passSignalsOn, runCommand } from './run-command.mjs';
import { typeChecks } from './type-checks.mjs';

passSignalsOn();
const ngc = join(root, 'node_modules', '@angular', 'compiler-cli', 'bundles', 'src', 'bin', 'ngc.js');
let failed = false;
for (const parameters of [...typeChecks, [ngc, '-p', 'tsconfig.app.json', '--noEmit']]) {
  const { code } = await runCommand(process.execPath, parameters);
  failed ||= code !== 0;
}
process.exit(failed ? 1 : 0);
