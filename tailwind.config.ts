import type { Config } from 'tailwindcss'

export default {
  content: [],
  theme: { extend: {} },
} satisfies Config
