import { defineConfig } from 'drizzle-kit';

export default defineConfig({
  dialect: 'postgresql',
  schema: './src/features/*/tables.ts',
  out: './drizzle',
  strict: true,
});
