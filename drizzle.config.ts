import { defineConfig } from 'drizzle-kit'

export default defineConfig({
  dialect: 'mysql',
  schema: './server/*/*.tables.ts',
  out: './drizzle',
  casing: 'snake_case',
})
