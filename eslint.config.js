import hooks from 'eslint-plugin-react-hooks'
import tseslint from 'typescript-eslint'

export default tseslint.config(
  { ignores: ['build/', 'node_modules/', '.react-router/', '.vite/', 'data/', 'tests/fixtures/', 'public/'] },
  ...tseslint.configs.recommended,
  {
    files: ['**/*.{ts,tsx}'],
    plugins: { 'react-hooks': hooks },
    rules: {
      ...hooks.configs.recommended.rules,
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_', caughtErrors: 'none' }],
      '@typescript-eslint/consistent-type-definitions': ['error', 'type'],
      '@typescript-eslint/consistent-type-imports': 'error',
      'no-empty': ['error', { allowEmptyCatch: false }],
      'no-restricted-syntax': [
        'error',
        {
          selector: 'JSXAttribute[name.name="dangerouslySetInnerHTML"]',
          message: 'Only components/prose.tsx may set HTML, and only sanitized HTML.'
        }
      ]
    }
  },
  { files: ['app/components/prose.tsx'], rules: { 'no-restricted-syntax': 'off' } },
  { files: ['db/migrations/*.ts', 'db/schema.ts'], rules: { '@typescript-eslint/no-explicit-any': 'off' } }
)
