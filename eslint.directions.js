/**
 * Which folder may import from which, checked by lint without exceptions. Import cycles, which no single file shows,
 * are looked for by `npm run cycles`.
 */
import boundaries from 'eslint-plugin-boundaries';

/** Folders of the server that hold a subject each: routes, rules, queries. */
const subjects = [
  'desk',
  'courses',
  'problems',
  'sets',
  'scripts',
  'marking',
  'results',
  'accounts',
  'record',
  'files',
  'corrections',
  'receipts',
  'queries',
  'own-data',
  'calendar',
];

/** What subjects stand on; each folder with those that it may use. */
const grounds = {
  access: ['http', 'drizzle'],
  http: ['access', 'context'],
  mail: ['http', 'access', 'context', 'drizzle'],
  live: ['http', 'access', 'context', 'drizzle'],
  jobs: ['http', 'access', 'live', 'mail', 'record', 'context', 'drizzle'],
  variants: ['keys', 'checks', 'optics', 'context', 'drizzle'],
  checks: ['keys', 'optics'],
  keys: ['optics'],
};

/** Pure functions: they import no folder of ours. */
const pure = ['optics', 'statistics'];

/** Features of the client, one lazily loaded folder each. */
const features = ['desk', 'problems', 'sets', 'sheet', 'marking', 'results', 'people', 'record', 'account'];

/** @param {readonly string[]} types */
const elements = (...types) => ({ element: { type: types.flat() } });

/**
 * @param {readonly string[] | string} from
 * @param {readonly string[]} to
 */
const allow = (from, to) => ({ from: elements(from), allow: { to: elements(to) } });

/**
 * For files beside the folders, not in one: a new folder has to be entered above before it may import anything.
 *
 * @param {string} from
 * @param {readonly string[]} to
 */
const allowAtTheRoot = (from, to) => ({
  from: { element: { type: from }, file: { categories: 'root' } },
  allow: { to: elements(to) },
});

const server = (name) => `server-${name}`;
/** The words of `grounds` as names of elements. */
const named = (name) => (['drizzle', 'context'].includes(name) ? name : server(name));
const subjectElements = subjects.map(server);
const featureElements = features.map((name) => `feature-${name}`);
const serverElements = [...subjects, ...Object.keys(grounds), ...pure].map(server);

/** One folder, matched from the project's root. */
const folder = (type, pattern) => ({ type, pattern, partialMatch: false });

/** Settings and rules, for eslint.config.js. */
export const directions = {
  name: 'halfsilver/directions',
  files: ['src/**/*.ts', 'server/**/*.ts', 'shared/**/*.ts', 'drizzle/**/*.ts', 'demo/**/*.ts'],
  plugins: { boundaries },
  settings: {
    'import/resolver': { typescript: { project: 'tsconfig.json', noWarnOnMultipleProjects: true } },
    'boundaries/root-path': import.meta.dirname,
    // The first that matches counts: folders before the folder that they lie in.
    'boundaries/elements': [
      ...features.map((name) => folder(`feature-${name}`, `src/app/${name}`)),
      folder('client-core', 'src/app/core'),
      folder('client-ui', 'src/app/ui'),
      folder('client', 'src'),
      ...[...subjects, ...Object.keys(grounds), ...pure, 'testing'].map((name) =>
        folder(server(name), `server/${name}`),
      ),
      folder('server', 'server'),
      folder('shared', 'shared'),
      folder('drizzle', 'drizzle'),
      folder('demo', 'demo'),
    ],
    'boundaries/files': [
      { category: 'test', pattern: ['**/*.spec.ts', 'server/**/testing/**/*.ts'] },
      { category: 'routes', pattern: 'server/*/*-routes.ts' },
      { category: 'context', pattern: 'server/{context,config}.ts' },
      { category: 'root', pattern: ['server/*.ts', 'src/*.ts', 'src/app/*.ts'] },
      { category: 'main', pattern: 'server/main.ts' },
    ],
  },
  rules: {
    'boundaries/no-unknown-files': 'error',
    'boundaries/dependencies': [
      'error',
      {
        default: 'disallow',
        checkUnknownLocals: true,
        message: '{{from.element.type}} may not import from {{to.element.type}} (see eslint.directions.js).',
        policies: [
          // The client
          allowAtTheRoot('client', ['client-core', 'client-ui', ...featureElements, 'shared']),
          allow('client-core', ['client-ui', 'shared']),
          allow('client-ui', ['shared']),
          allow(featureElements, ['client-core', 'client-ui', 'shared']),

          // The server
          allowAtTheRoot('server', [...serverElements, 'shared', 'drizzle']),
          ...Object.entries(grounds).map(([name, uses]) =>
            allow(server(name), ['shared', ...uses.filter((use) => use !== 'context').map(named)]),
          ),
          ...Object.entries(grounds)
            .filter(([, uses]) => uses.includes('context'))
            .map(([name]) => ({ from: elements(server(name)), allow: { to: { file: { categories: 'context' } } } })),
          allow(subjectElements, [
            'shared',
            'drizzle',
            ...subjectElements,
            ...Object.keys(grounds).map(server),
            'server-statistics',
          ]),
          { from: elements(subjectElements), allow: { to: { file: { categories: 'context' } } } },
          // A subject's routes are its own: others ask its queries and rules.
          {
            from: elements(subjectElements),
            disallow: { to: { file: { categories: 'routes' } } },
            message: 'Routes are only for app.ts; ask the subject’s queries or rules.',
          },
          allow('server-testing', ['server', ...serverElements, 'shared', 'drizzle']),
          // Tests make what they need through whichever subject makes it; pure functions need nothing.
          {
            from: {
              element: { type: [...subjects, ...Object.keys(grounds)].map(server) },
              file: { categories: 'test' },
            },
            allow: { to: elements([...serverElements, 'server', 'server-testing', 'shared', 'drizzle']) },
          },

          // What both sides share, the tables, and the demonstration
          allow('drizzle', ['shared']),
          allow('demo', [...serverElements, 'server', 'shared', 'drizzle']),
          { from: { file: { categories: 'main' } }, allow: { to: elements('demo') } },
        ],
      },
    ],
  },
};
