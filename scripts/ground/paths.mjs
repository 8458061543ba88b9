// What: where the scripts find the checkout and the folder they may write to. Plain Node: this runs before anything is installed.
import path from 'node:path';

export const root = path.resolve(import.meta.dirname, '..', '..');

/** Everything that a run leaves behind (database, bundles, photos, logs); git ignores it, deleting it costs only time. */
export const workFolder = path.join(root, '.rampwell');
export const serverBundle = path.join(workFolder, 'server.cjs');
export const webFolder = path.join(root, 'dist');
