/** Where Angular's development server sends what is not the client's: see scripts/dev.mjs. */
const target = process.env['HALFSILVER_SERVER'] || 'http://localhost:4301';

export default {
  '/api': { target, xfwd: true },
  '/live': { target, ws: true },
};
