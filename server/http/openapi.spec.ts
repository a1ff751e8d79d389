import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createHarness, type Harness } from '../testing/harness';

interface Operation {
  readonly responses: Record<string, unknown>;
  readonly parameters: readonly { readonly name: string; readonly in: string }[];
}

describe('the API’s document', () => {
  let harness: Harness;

  beforeAll(() => {
    harness = createHarness();
  });
  afterAll(() => harness.close());

  it('is OpenAPI 3.1 and names every route that is served, once', async () => {
    const client = await harness.agent(null);
    const document = (await client.get('/api/openapi.json')).body as {
      openapi: string;
      paths: Record<string, Record<string, Operation>>;
    };
    expect(document.openapi).toBe('3.1.0');
    const described = Object.entries(document.paths).flatMap(([path, operations]) =>
      Object.keys(operations).map((method) => `${method.toUpperCase()} ${path}`),
    );
    const served = harness.serve.routes.map((route) => `${route.method} /api${route.path.replace(/:(\w+)/g, '{$1}')}`);
    expect(described.toSorted()).toEqual(served.toSorted());
    const change = document.paths['/api/courses/{courseId}']?.['put'];
    expect(change?.parameters.map((each) => `${each.in} ${each.name}`)).toEqual(['path courseId', 'header If-Match']);
    expect(Object.keys(change?.responses ?? {})).toEqual(['200', 'default']);
  });

  it('is there beside a sign of life', async () => {
    const client = await harness.agent(null);
    expect((await client.get('/api/health')).body).toEqual({ status: 'ok' });
    const missing = await client.get('/api/nothing-of-the-kind');
    expect(missing.status).toBe(404);
    expect(missing.body.type).toBe('/errors/not-found');
  });

  it('comes with the strict content policy', async () => {
    const answer = await (await harness.agent(null)).get('/api/health');
    const policy = String(answer.headers['content-security-policy']);
    expect(policy).toContain("script-src 'self';");
    expect(policy).toContain("style-src-attr 'none'");
    expect(policy).not.toContain('unsafe');
    expect(answer.headers['x-content-type-options']).toBe('nosniff');
  });
});
