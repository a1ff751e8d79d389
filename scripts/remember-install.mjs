// npm's `postinstall`: the next start then knows that the packages fit the lockfile.
import { rememberInstall } from './install-packages.mjs';

rememberInstall();
