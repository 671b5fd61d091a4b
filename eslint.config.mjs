import withNuxt from './.nuxt/eslint.config.mjs'

const explicitOnly = (names, message) => ({ 'no-restricted-imports': ['error', { patterns: [{ group: names, message }] }] })

export default withNuxt(
  { ignores: ['.output/**', '.nuxt/**', '.data/**', 'server/db/migrations/**'] },
  {
    files: ['shared/**/*.ts'],
    rules: explicitOnly(
      ['vue', 'vue-*', '#app*', '#imports', 'h3', 'nitropack*', 'node:*', 'sharp', '~/*', '@/*', '**/server/**', 'pg', 'drizzle-*'],
      'shared/ is pure computation and contracts: no Vue, no Nitro, no Node, no sharp.',
    ),
  },
  {
    files: ['server/**/*.ts', 'server/**/*.mjs', 'pages/**', 'components/**', 'stores/**'],
    ignores: ['server/image/**'],
    rules: explicitOnly(['sharp'], 'Only server/image imports sharp, and it runs in child processes only.'),
  },
)
