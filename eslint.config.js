import importX from 'eslint-plugin-import-x';
import reactHooks from 'eslint-plugin-react-hooks';
import tseslint from 'typescript-eslint';

/** Who may import whom: each zone's files may not import from the folders listed with it. */
const zones = [
  { target: './shared', from: ['./server', './src', './tests'] },
  { target: './src', from: ['./server', './tests', './samples'] },
  { target: './server', from: ['./src', './tests'] },
  {
    target: ['./server/engine', './server/reader'],
    from: './server',
    except: ['./engine', './reader'],
  },
  {
    target: ['./server/routes', './server/policies', './server/entities', './server/migrations'],
    from: ['./server/engine', './server/reader', './server/jobs', './server/commands'],
  },
  { target: ['./server/policies', './server/entities'], from: ['./server/services', './server/routes'] },
  { target: './server/services', from: ['./server/routes', './server/reader', './server/commands'] },
].map((zone) => ({
  ...zone,
  message: 'This import crosses a wall of the house; see "Who may import whom" in DEVELOPERS.md.',
}));

export default tseslint.config(
  { ignores: ['dist/**', 'node_modules/**', '.data/**'] },
  ...tseslint.configs.recommended,
  {
    files: ['**/*.{ts,tsx,mjs}'],
    plugins: { 'import-x': importX, 'react-hooks': reactHooks },
    rules: {
      'import-x/no-restricted-paths': ['error', { zones }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-assertions': ['error', { assertionStyle: 'never' }],
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/ban-ts-comment': 'error',
      '@typescript-eslint/no-redeclare': 'off',
      ...reactHooks.configs.recommended.rules,
    },
  },
  {
    files: ['shared/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        { patterns: [{ regex: '^(?!\\.|zod$)', message: 'shared imports only zod.' }] },
      ],
    },
  },
  {
    files: ['server/engine/**/*.ts', 'server/reader/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              regex: '^(?!\\.|@stdlib/|fft\\.js$|papaparse$|zod$)',
              message: 'engine and reader are pure: no I/O, no server.',
            },
          ],
        },
      ],
      'no-restricted-globals': ['error', 'Date', 'process', 'performance', 'fetch'],
      'no-restricted-properties': ['error', { object: 'Math', property: 'random' }],
    },
  },
);
