import tseslint from 'typescript-eslint';
import reactHooks from 'eslint-plugin-react-hooks';

/** Dependencies point one way: frontend → common ← backend. */
const refuse = (...patterns) => ({ 'no-restricted-imports': ['error', { patterns }] });

export default tseslint.config(
  { ignores: ['**/dist/**', '**/node_modules/**', 'data/**', 'drizzle/**'] },
  ...tseslint.configs.recommended,
  {
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': 'off',
      eqeqeq: ['error', 'smart'],
    },
  },
  { files: ['common/src/**'], rules: refuse('node:*', 'fs', 'path', '@nestjs/*', 'react*', '**/backend/**', '**/frontend/**') },
  { files: ['frontend/src/**'], plugins: { 'react-hooks': reactHooks }, rules: { ...reactHooks.configs.recommended.rules, ...refuse('**/backend/**', '@nestjs/*') } },
  { files: ['backend/src/**'], rules: refuse('react*', '**/frontend/**') },
);
