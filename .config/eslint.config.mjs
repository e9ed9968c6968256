import tseslint from 'typescript-eslint'

const root = new URL('..', import.meta.url).pathname

export default tseslint.config(
  { ignores: ['**/dist/**', '**/node_modules/**', 'src/tables/calibration*.ts'] },
  ...tseslint.configs.recommended,
  {
    files: ['**/*.ts'],
    basePath: root,
    languageOptions: { parserOptions: { project: [`${root}.config/tsconfig.check.json`], tsconfigRootDir: root } },
    rules: {
      eqeqeq: 'error',
      'no-console': 'error',
      'prefer-const': 'error',
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      'no-restricted-imports': ['error', { patterns: [{ regex: '^(fs|path|os|zlib|url|crypto|child_process|worker_threads)$', message: 'use the node: protocol' }] }],
    },
  },
  {
    files: ['src/**/*.ts'],
    basePath: root,
    rules: {
      'no-restricted-globals': ['error', 'process', 'console', 'setTimeout', 'setInterval'],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'results depend on their input only' },
        { object: 'Date', property: 'now', message: 'cli injects the clock' },
      ],
    },
  },
  { files: ['tests/tools/**/*.ts'], basePath: root, rules: { 'no-console': 'off' } },
)
