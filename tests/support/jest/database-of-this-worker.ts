// What: before a test file imports the server: points it to the database of this Jest worker.
// Must not: reach for anything of the person's own: no address from outside gets in here.
import { databaseUrl } from '../postgres';

process.env.DATABASE_URL = databaseUrl(`rampwell_w${process.env.JEST_WORKER_ID}`);
