// What: makes sure that the Node packages and the Debian packages the project needs are there.
// Must not: install a package twice, or touch the system when it is not allowed to; then it says what to type.
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { root } from './paths.mjs';
import { Plainly, run } from './processes.mjs';

export const isRoot = process.getuid?.() === 0;

/** Node 20.19 is the first that loads ES modules by `require`, which the server's libraries need. */
export function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if ((major === 20 && minor >= 19) || major >= 22) return;
  throw new Plainly(`Rampwell needs Node 20.19 or newer (not 21). This is Node ${process.versions.node}.`);
}

/**
 * True when what npm noted about its last finished install is what package-lock.json asks for. npm writes that note after
 * everything else, so an install that was cut off does not count. Packages for other machines (optional) may be absent.
 */
function packagesAreThere() {
  const note = path.join(root, 'node_modules', '.package-lock.json');
  if (!existsSync(note)) return false;
  const wanted = JSON.parse(readFileSync(path.join(root, 'package-lock.json'), 'utf8')).packages;
  const there = JSON.parse(readFileSync(note, 'utf8')).packages;
  return Object.entries(wanted).every(([place, { version, integrity, optional }]) => {
    if (place === '' || (optional && !there[place])) return true;
    return there[place]?.version === version && there[place]?.integrity === integrity;
  });
}

export async function installPackages(say) {
  if (packagesAreThere()) return;
  say('Packages: installing what package-lock.json names (about a minute, once)');
  // The product and its development tools are one install: the pages are built here.
  await run('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    quiet: true,
    env: { ...process.env, NODE_ENV: 'development' },
  });
}

function onPath(program) {
  return (process.env.PATH ?? '')
    .split(path.delimiter)
    .map((folder) => path.join(folder, program))
    .find((file) => existsSync(file));
}

async function installDebianPackage(name, why) {
  if (!isRoot || !onPath('apt-get')) {
    throw new Plainly(`${why} Install it (Debian: sudo apt-get install ${name}) and start again.`);
  }
  const apt = (...args) =>
    run('apt-get', ['-o', 'DPkg::Lock::Timeout=300', '-q', ...args], {
      quiet: true,
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    });
  await apt('update');
  await apt('install', '-y', '--no-install-recommends', name);
}

/** Folder with initdb, pg_ctl and psql of PostgreSQL 15. Debian keeps them off the PATH. */
function findPostgres() {
  const debian = '/usr/lib/postgresql/15/bin';
  if (existsSync(path.join(debian, 'initdb'))) return debian;
  const other = onPath('initdb');
  return other && path.dirname(other);
}

const noOwnCluster = '/etc/postgresql-common/createcluster.d/rampwell.conf';

export async function postgresFolder(say) {
  const there = findPostgres();
  if (there) return there;
  const why = 'PostgreSQL 15 is not on this machine (or set DATABASE_URL to one that runs elsewhere).';
  if (isRoot && onPath('apt-get')) {
    say('PostgreSQL 15: installing the Debian package (once)');
    // Without this the package makes and starts a cluster of its own, which nobody asked for.
    mkdirSync(path.dirname(noOwnCluster), { recursive: true });
    writeFileSync(noOwnCluster, 'create_main_cluster = false\n');
  }
  try {
    await installDebianPackage('postgresql-15', why);
  } finally {
    rmSync(noOwnCluster, { force: true });
  }
  const now = findPostgres();
  if (!now) throw new Plainly('PostgreSQL 15 was installed, but initdb is not where Debian puts it.');
  return now;
}

export function chromiumPath() {
  return onPath('chromium') ?? onPath('chromium-browser') ?? onPath('google-chrome');
}

export async function installChromium(say) {
  if (chromiumPath()) return;
  if (isRoot) say('Chromium: installing the Debian package (once)');
  await installDebianPackage('chromium', 'The walk through the pages needs Chromium, which is not on this machine.');
}
