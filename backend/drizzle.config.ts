import { defineConfig } from 'drizzle-kit';

/** `npm run migration` compares the schema with the last migration and writes the next one. */
export default defineConfig({ dialect: 'postgresql', schema: './backend/src/database/schema/*.ts', out: './drizzle' });
