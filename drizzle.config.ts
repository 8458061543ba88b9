// What: where `npm run db:migration` finds the tables and writes the SQL. It compares files only and never opens a database.
import { defineConfig } from 'drizzle-kit';

export default defineConfig({
  dialect: 'postgresql',
  schema: './db/schema/*.ts',
  out: './db/migrations',
  strict: true,
});
