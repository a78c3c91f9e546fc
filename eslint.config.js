import js from '@eslint/js';
import astro from 'eslint-plugin-astro';
import boundaries from 'eslint-plugin-boundaries';
import jsxA11y from 'eslint-plugin-jsx-a11y';
import tseslint from 'typescript-eslint';

/** Packages that only some places may import, and what to use instead. */
const DRIZZLE = { group: ['drizzle-orm', 'drizzle-orm/*', 'pg'], message: 'Only tables, queries, commands and server/ speak to the database.' };
const SESSION = { group: ['lucia', '@lucia-auth/*', 'oslo', 'oslo/*'], message: 'Sessions and passwords go through server/authentication.' };
const NODE = { group: ['node:*'], message: 'This file also runs in the browser.' };
const MAKE_SCOPE = {
  group: ['~/server/scope', '**/server/scope'],
  importNames: ['makeScope'],
  message: 'A scope is made by the middleware, the job runner and the public gate alone.',
};

const typeOnly = (pattern) => ({ ...pattern, allowTypeImports: true });
const restrictTs = (...patterns) => ({ 'no-restricted-imports': 'off', '@typescript-eslint/no-restricted-imports': ['error', { patterns }] });

export default tseslint.config(
  { ignores: ['dist/**', '.local/**', '.astro/**', 'node_modules/**', 'tests/e2e/failures/**', 'public/**'] },
  js.configs.recommended,
  ...tseslint.configs.strict,
  ...astro.configs.recommended,
  ...astro.configs['jsx-a11y-recommended'],
  {
    languageOptions: { globals: { process: 'readonly', console: 'readonly', URL: 'readonly', fetch: 'readonly', Buffer: 'readonly', setTimeout: 'readonly', clearTimeout: 'readonly', setInterval: 'readonly', clearInterval: 'readonly', AbortSignal: 'readonly', performance: 'readonly' } },
    rules: {
      'no-console': 'error',
      'no-undef': 'off',
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/no-invalid-void-type': 'off',
      '@typescript-eslint/no-dynamic-delete': 'off',
      'no-control-regex': 'off',
    },
  },
  { files: ['src/env.d.ts'], rules: { '@typescript-eslint/consistent-type-imports': 'off' } },
  { files: ['**/*.astro'], rules: { '@typescript-eslint/consistent-type-imports': 'off', 'astro/no-set-html-directive': 'off' } },
  { files: ['scripts/**', 'fakes/**', 'seed/**', 'tests/**'], rules: { 'no-console': 'off' } },
  // The Astro set brings the same plugin; an object of its own would count as another.
  {
    files: ['src/**/*.tsx'],
    rules: {
      ...jsxA11y.flatConfigs.recommended.rules,
      // A region that scrolls must be reachable by keyboard.
      'jsx-a11y/no-noninteractive-tabindex': ['error', { tags: [], roles: ['tabpanel', 'region'] }],
    },
  },

  // Who may import whom. Everything not allowed is refused.
  {
    files: ['src/**/*.{ts,tsx,astro}'],
    plugins: { boundaries },
    settings: {
      'import/resolver': { typescript: { alwaysTryTypes: true, project: './tsconfig.json' } },
      'boundaries/include': ['src/**/*'],
      'boundaries/dependency-nodes': ['import', 'dynamic-import', 'export'],
      'boundaries/elements': [
        { type: 'pages', pattern: 'src/pages/**/*', mode: 'full' },
        { type: 'middleware', pattern: 'src/middleware.ts', mode: 'full' },
        { type: 'layouts', pattern: 'src/layouts/*', mode: 'full' },
        { type: 'components', pattern: 'src/components/**/*', mode: 'full' },
        { type: 'styles', pattern: 'src/styles/*', mode: 'full' },
        { type: 'client', pattern: 'src/client/*', mode: 'full' },
        { type: 'domain', pattern: 'src/domain/**/*', mode: 'full' },
        { type: 'module-contract', pattern: 'src/event-modules/*.ts', mode: 'full' },
        { type: 'event-module', pattern: 'src/event-modules/*/**/*', mode: 'full', capture: ['module'] },
        { type: 'job-handlers', pattern: 'src/server/job-handlers.ts', mode: 'full' },
        { type: 'direct-endpoints', pattern: 'src/server/direct-endpoints.ts', mode: 'full' },
        { type: 'server-entry', pattern: ['src/server/main.ts', 'src/server/development.ts'], mode: 'full' },
        { type: 'authentication', pattern: 'src/server/authentication.ts', mode: 'full' },
        { type: 'server', pattern: 'src/server/*', mode: 'full' },
        { type: 'feature-tables', pattern: 'src/features/*/tables.ts', mode: 'full', capture: ['feature'] },
        { type: 'feature-queries', pattern: 'src/features/*/queries.ts', mode: 'full', capture: ['feature'] },
        { type: 'feature-command', pattern: 'src/features/*/commands/*', mode: 'full', capture: ['feature'] },
        { type: 'feature-loaders', pattern: 'src/features/*/loaders.ts', mode: 'full', capture: ['feature'] },
        { type: 'feature-jobs', pattern: 'src/features/*/jobs.ts', mode: 'full', capture: ['feature'] },
        { type: 'feature-emails', pattern: 'src/features/*/emails/*', mode: 'full', capture: ['feature'] },
        { type: 'feature-components', pattern: 'src/features/*/components/**/*', mode: 'full', capture: ['feature'] },
        { type: 'feature-plain', pattern: ['src/features/*/schema.ts', 'src/features/*/types.ts', 'src/features/*/constants.ts', 'src/features/*/policy.ts', 'src/features/*/assembly.ts'], mode: 'full', capture: ['feature'] },
        { type: 'feature-test', pattern: 'src/features/**/*.test.{ts,tsx}', mode: 'full', capture: ['feature'] },
      ],
    },
    rules: {
      'boundaries/element-types': [
        'error',
        {
          default: 'disallow',
          message: '${file.type} may not import ${dependency.type} (see “Who may import whom” in DEVELOPERS.md)',
          rules: [
            { from: 'pages', allow: ['layouts', 'components', 'styles', 'client', 'domain', 'module-contract', 'feature-loaders', 'feature-command', 'feature-components', 'feature-plain', 'server'] },
            { from: 'middleware', allow: ['server'] },
            { from: 'layouts', allow: ['layouts', 'components', 'styles', 'client', 'domain'] },
            { from: 'components', allow: ['components', 'client', 'domain', 'styles'] },
            { from: 'client', allow: ['client', 'domain'] },
            { from: 'domain', allow: ['domain'] },
            { from: 'module-contract', allow: ['module-contract', 'event-module', 'domain'] },
            { from: 'event-module', allow: [['event-module', { module: '${from.module}' }], 'module-contract', 'domain', 'components', 'client'] },
            { from: 'server', allow: ['server', 'authentication', 'domain'] },
            { from: 'authentication', allow: ['server', 'feature-tables'] },
            { from: 'job-handlers', allow: ['feature-jobs', 'server'] },
            { from: 'direct-endpoints', allow: ['server', 'pages'] },
            { from: 'server-entry', allow: ['server', 'authentication', 'job-handlers', 'direct-endpoints'] },
            { from: 'feature-tables', allow: ['feature-tables', 'feature-plain', 'domain'] },
            { from: 'feature-plain', allow: ['feature-plain', 'domain', 'module-contract', 'server'] },
            { from: 'feature-queries', allow: ['feature-tables', 'feature-queries', 'feature-plain', 'domain', 'module-contract', 'server'] },
            { from: 'feature-command', allow: ['feature-tables', 'feature-queries', 'feature-command', 'feature-plain', 'domain', 'module-contract', 'server', 'authentication'] },
            { from: 'feature-loaders', allow: ['feature-queries', 'feature-loaders', 'feature-plain', 'domain', 'module-contract', 'server', 'authentication'] },
            { from: 'feature-jobs', allow: ['feature-queries', 'feature-command', 'feature-plain', 'feature-emails', 'feature-tables', 'domain', 'server', 'authentication'] },
            { from: 'feature-emails', allow: ['feature-emails', 'feature-plain', 'domain'] },
            { from: 'feature-components', allow: ['feature-components', 'feature-plain', 'feature-loaders', 'components', 'layouts', 'client', 'domain', 'module-contract', 'server'] },
            { from: 'feature-test', allow: ['*'] },
          ],
        },
      ],
    },
  },
  // Packages, place by place. (The last matching block decides.)
  { files: ['src/**/*.{ts,tsx,astro}'], ignores: ['src/**/*.test.{ts,tsx}'], rules: restrictTs(DRIZZLE, SESSION, MAKE_SCOPE) },
  {
    files: ['src/pages/**/*.{ts,astro}', 'src/features/*/components/**/*.astro', 'src/features/*/schema.ts', 'src/features/*/policy.ts'],
    rules: restrictTs(DRIZZLE, SESSION, MAKE_SCOPE, typeOnly({ group: ['~/server/database', '**/server/database'], message: 'Pages call one loader or one command.' })),
  },
  { files: ['src/features/*/tables.ts', 'src/features/*/queries.ts', 'src/features/*/commands/*.ts', 'src/features/*/jobs.ts'], rules: restrictTs(SESSION, MAKE_SCOPE) },
  { files: ['src/server/*.ts'], ignores: ['src/server/request-scope.ts', 'src/server/scope.ts', 'src/server/jobs.ts'], rules: restrictTs(SESSION, MAKE_SCOPE) },
  { files: ['src/server/request-scope.ts', 'src/server/jobs.ts'], rules: restrictTs(SESSION) },
  { files: ['src/server/authentication.ts'], rules: restrictTs(MAKE_SCOPE) },
  {
    files: ['src/domain/**/*.ts', 'src/event-modules/**/*.{ts,tsx}', 'src/client/*.ts', 'src/components/**/*.tsx', 'src/features/*/schema.ts', 'src/features/*/components/**/*.tsx'],
    ignores: ['src/**/*.test.{ts,tsx}'],
    rules: restrictTs(DRIZZLE, SESSION, NODE, typeOnly({ group: ['~/server/*'], message: 'The browser never imports server files.' })),
  },
);
