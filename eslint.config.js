import { existsSync, readdirSync } from 'node:fs';
import js from '@eslint/js';
import { createNodeResolver, importX } from 'eslint-plugin-import-x';
import reactHooks from 'eslint-plugin-react-hooks';
import { defineConfig } from 'eslint/config';
import tseslint from 'typescript-eslint';

const featureFolder = 'src/features';
const features = existsSync(featureFolder) ? readdirSync(featureFolder) : [];

/** Dependencies point one way: src → shared ← workers ← server. */
const zones = [
  { target: './shared', from: ['./src', './server', './workers', './tests'] },
  { target: './shared/types', from: ['./shared/schemas', './shared/chemistry', './shared/jobs'] },
  { target: './workers', from: ['./src', './server', './tests'] },
  { target: './server', from: ['./src', './tests'] },
  { target: './src', from: ['./server', './workers', './tests'] },
  { target: './src/lib', from: ['./src/app', './src/features', './src/components'] },
  { target: './src/components', from: ['./src/app', './src/features'] },
  {
    target: './src/features',
    from: './src/app',
    except: ['./paths.ts'],
    message: 'Features know the paths of the app and nothing else of it.',
  },
  ...features.map((feature) => ({
    target: `./${featureFolder}/${feature}`,
    from: `./${featureFolder}`,
    except: [`./${feature}`],
    message: 'Features meet only in src/app.',
  })),
];

export default defineConfig(
  { ignores: ['dist/', '.data/', '.test-data/', 'test-artefacts/', 'coverage/', 'workers/enumeration/assembly/'] },
  js.configs.recommended,
  tseslint.configs.recommended,
  {
    plugins: { 'import-x': importX },
    settings: {
      'import-x/resolver-next': [
        createNodeResolver({ extensions: ['.ts', '.tsx', '.js', '.mjs', '.json'], extensionAlias: { '.js': ['.ts', '.tsx', '.js'] } }),
      ],
    },
    rules: {
      eqeqeq: 'error',
      // It does not see reads inside of functions that are called in between.
      'no-useless-assignment': 'off',
      'import-x/no-restricted-paths': ['error', { zones }],
      'import-x/no-default-export': 'error',
      'import-x/no-cycle': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': [
        'error',
        { fixStyle: 'inline-type-imports', prefer: 'type-imports', disallowTypeAnnotations: false },
      ],
    },
  },
  {
    files: ['**/*.{ts,tsx}'],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      // TypeScript itself reports undefined names, and knows the globals of each side.
      'no-undef': 'off',
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/await-thenable': 'error',
    },
  },
  {
    files: ['**/*.{js,mjs}'],
    languageOptions: {
      globals: { process: 'readonly', console: 'readonly', URL: 'readonly', setTimeout: 'readonly', clearTimeout: 'readonly' },
    },
  },
  {
    files: ['server/**/*.ts'],
    rules: {
      '@typescript-eslint/no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              regex: '(^|/)workers/',
              allowTypeImports: true,
              message: 'The server starts workers by file URL; only types may be imported.',
            },
          ],
        },
      ],
    },
  },
  {
    files: ['src/**/*.{ts,tsx}'],
    extends: [reactHooks.configs.flat.recommended],
    // Speaks of the React compiler, which this project does not use.
    rules: { 'react-hooks/incompatible-library': 'off' },
  },
  {
    // These tools find what they need by the default export.
    files: ['vite.config.ts', 'eslint.config.js', 'tests/support/summary-reporter.ts'],
    rules: { 'import-x/no-default-export': 'off' },
  },
);
