import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { of } from 'rxjs';
import type { KeyFunction } from '@shared/key-language';
import { ProblemsApi } from '../../core/api/problems-api';
import { provideLook } from '../../ui/look';
import { findFunctions } from './find-functions';
import KeyLanguagePage from './key-language';

const build = (change: Partial<KeyFunction>): KeyFunction => ({
  name: 'lose',
  signature: 'lose(state, eta)',
  summary: 'A loss of transmissivity η.',
  formula: 'a\\to\\sqrt\\eta\\,a',
  group: 'Operations',
  makes: 'state',
  arguments: [{ name: 'eta', domain: '0 to 1' }],
  example: { expression: 'meanPhotons(lose(fock(1), 0.6))', value: 0.6, method: 'moments', agreesTo: 15 },
  ...change,
});
const functions = [
  build({ name: 'thermal', signature: 'thermal(nbar)', summary: 'Thermal light.', group: 'States of one mode' }),
  build({}),
];

async function show(inputs: Readonly<Record<string, unknown>> = {}) {
  const api = {
    keyLanguage: () => of({ functions, constants: [{ name: 'boltzmann', value: 1.380649e-23, unit: 'J K^-1' }] }),
  };
  TestBed.configureTestingModule({
    providers: [provideLook(), provideRouter([]), { provide: ProblemsApi, useValue: api }],
  });
  const fixture = TestBed.createComponent(KeyLanguagePage);
  for (const [name, value] of Object.entries({ courseId: 'c', ...inputs })) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  return fixture.nativeElement as HTMLElement;
}

describe('KeyLanguagePage', () => {
  it('shows one heading at a time, with formula, domain, and what the example came to', async () => {
    const page = await show({ about: 'Operations' });
    const articles = page.querySelectorAll('article');
    expect(articles).toHaveLength(1);
    expect(articles[0]?.textContent).toContain('lose(state, eta)');
    expect(articles[0]?.textContent).toContain('0 to 1');
    expect(articles[0]?.textContent).toContain('two methods agree to 15 digits');
    expect(articles[0]?.querySelector('.katex')).not.toBeNull();
    expect(articles[0]?.querySelector('app-key-value')?.textContent).toContain('0.6');
  });

  it('finds words under every heading, and says where there are none', async () => {
    expect((await show({ search: 'thermal light' })).querySelectorAll('article')).toHaveLength(1);
    TestBed.resetTestingModule();
    const none = await show({ search: 'entanglement witness' });
    expect(none.querySelectorAll('article')).toHaveLength(0);
    expect(none.textContent).toContain('No function has all of these words.');
  });

  it('lists the constants with their units', async () => {
    expect((await show()).textContent).toContain('1.380649 × 10⁻²³ J K^-1');
  });
});

describe('findFunctions', () => {
  it('puts what is named so before what only speaks of it', () => {
    const speaks = build({ name: 'damp', signature: 'damp(state)', summary: 'As thermal loss.' });
    expect(findFunctions([speaks, ...functions], 'thermal').map(({ name }) => name)).toEqual(['thermal', 'damp']);
  });
});
