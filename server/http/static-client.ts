import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Express, Request, Response } from 'express';
import expressStaticGzip from 'express-static-gzip';
import { notFound } from './errors';
import { nonceOf } from './content-policy';

const year = 31_536_000;

/** Serves the built client: its files, and for every other address the page, with the response's nonce filled in. */
export function serveClient(app: Express, folder: string): void {
  const index = join(folder, 'index.html');
  let page = existsSync(index) ? readFileSync(index, 'utf8') : null;

  app.use(
    expressStaticGzip(folder, {
      enableBrotli: true,
      orderPreference: ['br', 'gz'],
      index: false,
      serveStatic: {
        setHeaders: (response, path) => {
          // Built files carry a hash in their name; the others may change under the same one.
          const lasting = /-[A-Z0-9]{8}\.\w+(\.br|\.gz)?$/.test(path);
          response.setHeader('Cache-Control', lasting ? `public, max-age=${String(year)}, immutable` : 'no-cache');
        },
      },
    }),
  );

  app.get('/{*path}', (request: Request, response: Response) => {
    if (/\.\w{2,5}$/.test(request.path)) throw notFound('file');
    page ??= readFileSync(index, 'utf8');
    response
      .setHeader('Cache-Control', 'no-store')
      .type('html')
      .send(page.replaceAll('%CSP_NONCE%', nonceOf(response)));
  });
}
