import nextVitals from 'eslint-config-next/core-web-vitals'
import nextTypescript from 'eslint-config-next/typescript'
import { defineConfig, globalIgnores } from 'eslint/config'

// The rooms of lib/work in the order in which the work passes through them: a room uses those above it, never those below.
const ROOMS = [
  'people',
  'campaigns',
  'intake',
  'stamps',
  'calibration',
  'queue',
  'sheet',
  'grading',
  'consensus',
  'discussion',
  'rulings',
  'matching',
  'measuring',
  'catalogue',
  'releases',
  'reports',
]

const zone = (target, from, message, except = []) => ({ target, from, message, except })

const zones = [
  zone('./lib/science', './!(lib|node_modules)/**/*', 'lib/science is pure: pass numbers in and take numbers out.'),
  zone('./lib/science', './lib/work', 'lib/science knows nothing of the product: move the call up into lib/work.'),
  zone('./lib/science', './lib/platform', 'lib/science has no clock, files or settings: pass values in.'),
  zone('./db', './app', 'Queries know no pages.'),
  zone('./db', './components', 'Queries know no components.'),
  zone('./db', './lib/work', 'Queries know no use cases: pass plain values in.'),
  zone('./lib/platform', './lib/work', 'lib/platform carries lib/work: pass handlers in.'),
  zone('./lib/platform', './app', 'lib/platform knows no pages.'),
  zone('./lib/platform', './components', 'lib/platform knows no components.'),
  zone('./db', './lib/science', 'Queries know no science: pass numbers in.'),
  zone('./components', './app', 'A component is shown by pages and knows none: pass what it needs.'),
  zone('./lib/work', './app', 'A use case knows no page: return data and let app/ shape it.'),
  zone('./lib/work', './components', 'A use case knows no component.'),
  zone('./components', './db', 'Components take plain objects: have the page read them through lib/work.', [
    './schema',
  ]),
  zone('./components', './lib/platform', 'Components run in the browser: have the page do it.'),
  zone('./app', './db', 'Go through a use case of lib/work, which checks who may.', ['./schema']),
  zone(
    './migrations',
    './!(migrations|node_modules)/**/*',
    'Migrations are frozen: they import kysely and nothing that changes.',
  ),
  ...['app', 'components', 'lib', 'db', 'migrations'].flatMap((target) =>
    ['tests', 'fixtures'].map((kept) =>
      zone(`./${target}/**/!(*.test|_*).{ts,tsx}`, `./${kept}`, `Product code never imports ${kept}.`),
    ),
  ),
  ...ROOMS.flatMap((room, index) =>
    ROOMS.slice(index + 1).map((below) =>
      zone(
        `./lib/work/${room}/!(*.test).ts`,
        `./lib/work/${below}`,
        `${room} comes before ${below} in the path of the work: send a job or write an event row instead.`,
      ),
    ),
  ),
]

export default defineConfig([
  ...nextVitals,
  ...nextTypescript,
  globalIgnores(['.next/**', 'dist-workers/**', 'next-env.d.ts', 'data/**', 'coverage/**']),
  {
    settings: { 'import/resolver': { typescript: { project: './tsconfig.json' } } },
    rules: {
      'import/no-restricted-paths': ['error', { zones }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@next/next/no-img-element': 'off',
    },
  },
  {
    files: ['lib/**/*.ts', 'app/**/*.{ts,tsx}', 'components/**/*.{ts,tsx}', 'db/**/*.ts'],
    ignores: ['lib/platform/config/**', 'lib/work/start-server.ts', '**/*.test.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'process', property: 'env', message: 'Settings are read once, in lib/platform/config/config.ts.' },
      ],
      'no-restricted-syntax': [
        'error',
        {
          selector: 'VariableDeclarator[init.name="process"]',
          message: 'Settings are read once, in lib/platform/config/config.ts.',
        },
      ],
    },
  },
  {
    files: ['lib/science/**/*.ts'],
    // Inflating is left to Node's zlib, so reading FITS runs on the server and in workers only.
    ignores: ['**/*.test.ts', '**/_*.ts', 'lib/science/fits/gunzip.ts', 'lib/science/fits/tiles/gzip-tile.ts'],
    rules: {
      '@typescript-eslint/no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              group: ['node:*', 'next', 'next/*', 'kysely', 'react'],
              message: 'lib/science is pure: no files, clock, network, database or page.',
            },
          ],
        },
      ],
      'no-restricted-syntax': [
        'error',
        {
          selector: 'NewExpression[callee.name="Date"][arguments.length=0]',
          message: 'lib/science has no clock: pass the time in.',
        },
      ],
      'no-restricted-globals': [
        'error',
        { name: 'performance', message: 'lib/science has no clock: pass the time in.' },
      ],
    },
  },
  {
    files: ['lib/science/**/*.ts'],
    ignores: ['**/*.test.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        {
          object: 'Math',
          property: 'random',
          message: 'Take a seeded generator: the same input gives the same output.',
        },
        { object: 'Date', property: 'now', message: 'lib/science has no clock: pass the time in.' },
      ],
    },
  },
])
