import tseslint from 'typescript-eslint';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';

// The same bits everywhere: these differ between builds of the JavaScript engine, between machines
// or between runs. engine/numbers holds our own.
const transcendentals = [
  'exp expm1 log log1p log2 log10 pow sin cos tan asin acos atan atan2 sinh cosh tanh cbrt hypot',
  'random',
]
  .join(' ')
  .split(' ');

const sameBits = {
  'no-restricted-properties': [
    'error',
    ...transcendentals.map((property) => ({
      object: 'Math',
      property,
      message: 'differs between machines or runs: take it from engine/numbers',
    })),
  ],
  'no-restricted-globals': [
    'error',
    ...[
      'Date',
      'performance',
      'crypto',
      'process',
      'window',
      'document',
      'fetch',
      'setTimeout',
      'Intl',
    ].map((name) => ({ name, message: 'the engine has no clock, no machine and no chance' })),
  ],
  'no-restricted-syntax': [
    'error',
    { selector: "BinaryExpression[operator='**']", message: 'use a product: ** differs' },
    { selector: "AssignmentExpression[operator='**=']", message: 'use a product: ** differs' },
    {
      selector:
        'CallExpression[callee.property.name=/^(localeCompare|toLocaleString|toLocaleLowerCase|toLocaleUpperCase)$/]',
      message: 'locales differ between machines: compare code units',
    },
  ],
};

export default tseslint.config(
  { ignores: ['node_modules', 'out', 'dist', 'screenshots', 'bench', '**/*.as.ts'] },
  ...tseslint.configs.recommended,
  ...svelte.configs.recommended,
  {
    languageOptions: { globals: { ...globals.es2023 } },
    rules: {
      eqeqeq: 'error',
      'no-console': 'error',
      'prefer-const': 'error',
      'no-cond-assign': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': 'error',
    },
  },
  { files: ['**/*.mjs', '**/*.js', '**/*.cjs'], languageOptions: { globals: globals.node } },
  {
    files: ['**/*.svelte', '**/*.svelte.ts'],
    languageOptions: { parserOptions: { parser: tseslint.parser } },
    // What a component takes in is declared with one `let`, whether or not it is written to.
    rules: { 'prefer-const': 'off' },
  },
  { files: ['renderer/**'], languageOptions: { globals: globals.browser } },
  { files: ['**/*.cjs'], rules: { '@typescript-eslint/no-require-imports': 'off' } },
  { files: ['engine/**/*.ts'], rules: sameBits },
);
