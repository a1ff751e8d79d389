import { createContext, Script } from 'node:vm';

const context = createContext({ act: undefined });
const script = new Script('act()');

/**
 * Does something in this process, and stops it where it takes too long: for tools that answer line by line and start
 * fast. Servers evaluate in the pool, which can also take the memory back.
 *
 * What is stopped is stopped anywhere, without its `finally`: it must not leave anything half done that others see.
 *
 * @param longest in milliseconds
 * @returns whether it came to its end
 */
export function withinTime(longest: number, act: () => void): boolean {
  Object.assign(context, { act });
  try {
    script.runInContext(context, { timeout: longest });
    return true;
  } catch (error) {
    // An error of the script's own realm: no instance of this one's Error.
    const timedOut = typeof error === 'object' && error !== null && 'code' in error;
    if (timedOut && error.code === 'ERR_SCRIPT_EXECUTION_TIMEOUT') return false;
    throw error;
  } finally {
    Object.assign(context, { act: undefined });
  }
}
