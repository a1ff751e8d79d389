// `npm run build`: installs what is missing and builds what has changed; `npm run build server` only that half.
import { buildProgram } from './build-program.mjs';
import { demandNode } from './check-machine.mjs';
import { installPackages } from './install-packages.mjs';
import { passSignalsOn } from './run-command.mjs';

demandNode();
passSignalsOn();
await installPackages();
try {
  const wanted = process.argv.slice(2);
  await buildProgram(wanted.length > 0 ? wanted : undefined);
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
}
