import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import { createNodeResolver, importX } from 'eslint-plugin-import-x';
import vue from 'eslint-plugin-vue';
import globals from 'globals';
import tseslint from 'typescript-eslint';

const asyncTransaction = {
  selector:
    'CallExpression[callee.property.name="transaction"] > :matches(ArrowFunctionExpression, FunctionExpression)[async=true]',
  message: 'A transaction is one synchronous function: an async one commits before its work is done.',
};
const rawSql = {
  selector: 'MemberExpression[object.name="sql"][property.name="raw"]',
  message: 'sql.raw puts text into SQL unescaped. Write sql`...` with parameters.',
};
const processEnv = {
  selector: 'MemberExpression[object.name="process"][property.name="env"]',
  message: 'Only server/config.ts and server/setup read the environment.',
};
const networkCall = {
  selector:
    ':matches(CallExpression[callee.name="fetch"], CallExpression[callee.object.name=/^(window|globalThis)$/][callee.property.name="fetch"], NewExpression[callee.name=/^(XMLHttpRequest|EventSource|WebSocket)$/])',
  message: 'Only src/api talks to the server.',
};

const wavesurfer = {
  group: ['wavesurfer.js', 'wavesurfer.js/*'],
  message: 'One component draws the waveform: components/bench/WaveformStrip.vue. Use it.',
};
const waveformComponent = 'src/components/bench/WaveformStrip.vue';

/** A layer's files may not import what matches these patterns. */
function forbid(files, patterns, ignores = []) {
  return {
    files,
    ignores,
    rules: { 'no-restricted-imports': ['error', { patterns }] },
  };
}

function group(message, ...patterns) {
  return { group: patterns, message };
}

const sharedLayer = [
  group('shared imports nothing of ours outside shared.', '**/server/**', '**/src/**', '@/*'),
  group('shared runs anywhere: no Node.', 'node:*'),
];
const lowServerLayer = [
  group('This layer knows no feature and no Express.', '**/features/**', '**/http/**', 'express'),
  group('server never imports src.', '**/src/**', '@/*'),
];
const pureServerLayer = [
  ...lowServerLayer,
  group(
    'This layer computes and nothing else.',
    '**/db/**',
    '**/store/**',
    '!**/store/durable-file.ts',
    '!**/store/file-source.ts',
    '**/jobs/**',
    '**/services/**',
  ),
];
const clientLayer = [group('src never imports server.', '**/server/**', 'node:*')];
const componentLayer = [
  ...clientLayer,
  group('Components get props and emit events.', '@/api/*', '@/views/*', '**/api/**', '**/views/**'),
];

const layers = [
  forbid(['shared/**/*.ts'], sharedLayer),
  forbid(
    ['shared/lib/**/*.ts', 'shared/audio/**/*.ts', 'shared/domain/**/*.ts'],
    [...sharedLayer, group('lib <- audio, domain <- contract, policy.', '**/contract/**', '**/policy/**')],
  ),
  forbid(
    ['server/db/**/*.ts', 'server/store/**/*.ts', 'server/jobs/**/*.ts', 'server/services/**/*.ts'],
    lowServerLayer,
  ),
  forbid(
    [
      'server/signal/**/*.ts',
      'server/kernel/**/*.ts',
      'server/measuring/**/*.ts',
      'server/packaging/**/*.ts',
      'server/importing/**/*.ts',
    ],
    pureServerLayer,
  ),
  forbid(
    ['server/features/**/*.service.ts'],
    [group('Services know no Express.', 'express', '**/*.routes.ts')],
  ),
  forbid(
    ['server/features/**/*.queries.ts'],
    [
      group(
        'Queries hold SQL and nothing else.',
        'express',
        '**/http/**',
        '**/store/**',
        '**/jobs/**',
        '**/services/**',
        '**/*.service.ts',
        '**/*.routes.ts',
      ),
    ],
  ),
  forbid(['src/**/*.{ts,vue}'], [...clientLayer, wavesurfer], ['src/components/**', waveformComponent]),
  forbid(['src/components/**/*.{ts,vue}'], [...componentLayer, wavesurfer], [waveformComponent]),
  forbid([waveformComponent], componentLayer),
];

/**
 * Lines of a function without those of the functions declared inside it: a factory that closes over its parts is as long as
 * its own statements, and each part is judged by itself.
 */
const ownLines = {
  meta: {
    type: 'suggestion',
    schema: [{ type: 'integer' }],
    messages: { long: 'This function has {{ lines }} lines of its own; at most {{ most }} are allowed.' },
  },
  create(context) {
    const [most] = context.options;
    const innerLines = [0];
    const enter = () => innerLines.push(0);
    const leave = (node) => {
      const allLines = node.loc.end.line - node.loc.start.line + 1;
      const lines = allLines - innerLines.pop();
      innerLines.push(innerLines.pop() + allLines - 1);
      if (lines > most) context.report({ node, messageId: 'long', data: { lines, most } });
    };
    return { ':function': enter, ':function:exit': leave };
  },
};

const typeChecked = {
  files: ['server/**/*.ts', 'shared/**/*.ts', 'src/**/*.ts', 'tests/**/*.ts'],
  languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
  rules: {
    '@typescript-eslint/no-floating-promises': 'error',
    '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { arguments: false } }],
    '@typescript-eslint/await-thenable': 'error',
  },
};

export default tseslint.config(
  {
    ignores: [
      'dist',
      'data',
      'data-*',
      'drizzle',
      'fixtures',
      'coverage',
      '.setup',
      'src/components.d.ts',
      // AssemblyScript, which its own compiler checks.
      'server/kernel/assembly',
    ],
  },
  { linterOptions: { noInlineConfig: true, reportUnusedDisableDirectives: 'error' } },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  ...vue.configs['flat/essential'],
  {
    // The circles of the client are found by tests/architecture.test.ts, which reads components as well.
    files: ['server/**/*.ts', 'shared/**/*.ts'],
    plugins: { 'import-x': importX },
    settings: {
      'import-x/parsers': { '@typescript-eslint/parser': ['.ts'] },
      'import-x/extensions': ['.ts'],
      'import-x/resolver-next': [createNodeResolver({ extensions: ['.ts', '.mjs', '.js'] })],
    },
    rules: { 'import-x/no-cycle': ['error', { ignoreExternal: true }] },
  },
  {
    files: ['**/*.{ts,vue}'],
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/ban-ts-comment': 'error',
      // The compiler knows which names exist.
      'no-undef': 'off',
      eqeqeq: 'error',
      'no-console': 'error',
    },
  },
  {
    files: ['**/*.vue'],
    languageOptions: { parserOptions: { parser: tseslint.parser } },
    rules: { 'vue/block-lang': ['error', { script: { lang: 'ts' } }] },
  },
  typeChecked,
  {
    files: ['server/**/*.ts', 'shared/**/*.ts', 'src/**/*.{ts,vue}'],
    plugins: { recalesce: { rules: { 'own-lines': ownLines } } },
    rules: {
      'max-lines': ['error', { max: 300 }],
      'recalesce/own-lines': ['error', 80],
      'no-restricted-syntax': ['error', asyncTransaction, rawSql, processEnv],
    },
  },
  {
    files: ['src/**/*.{ts,vue}'],
    languageOptions: { globals: globals.browser },
    rules: { 'no-restricted-syntax': ['error', networkCall] },
  },
  { files: ['src/api/**/*.ts'], rules: { 'no-restricted-syntax': 'off' } },
  {
    files: ['server/config.ts', 'server/setup/**/*.ts'],
    rules: { 'no-restricted-syntax': ['error', asyncTransaction, rawSql] },
  },
  { files: ['server/main.ts', 'server/setup/**/*'], rules: { 'no-console': 'off' } },
  {
    files: ['**/*.{mjs,js}', 'vite.config.ts', 'drizzle.config.ts'],
    languageOptions: { globals: globals.node },
  },
  {
    files: ['tests/**/*.ts'],
    rules: {
      // A fixture that asks for no other fixture takes an empty object.
      'no-empty-pattern': ['error', { allowObjectPatternsAsParameters: true }],
    },
  },
  ...layers,
  prettier,
);
