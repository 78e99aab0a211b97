/**
 * Makes a fresh clone runnable: installs packages only when what is on disk differs from the lock
 * file. Plain Node, no packages, because it runs before there are any.
 *
 * It looks at the packages themselves, not at the installer's own record of them: a folder that was
 * half copied, or lost a package, is found out.
 */
import { existsSync, readFileSync } from 'node:fs';
import { spawnSync } from 'node:child_process';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = join(dirname(fileURLToPath(import.meta.url)), '..');
const oldestNode = 20;

const major = Number(process.versions.node.split('.')[0]);
if (major < oldestNode) {
  console.error(
    `Stillspan needs Node ${oldestNode} or newer; this is Node ${process.versions.node}. Install Node ${oldestNode} and run the command again.`,
  );
  process.exit(1);
}

/** Names the first package whose version on disk is not the lock file's, or null when all agree. */
function firstDifference() {
  const lock = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8'));
  for (const [path, entry] of Object.entries(lock.packages)) {
    if (path === '' || entry.link) continue;
    const manifest = join(root, path, 'package.json');
    if (!existsSync(manifest)) {
      if (entry.optional) continue; // for another operating system
      return path;
    }
    try {
      if (JSON.parse(readFileSync(manifest, 'utf8')).version !== entry.version) return path;
    } catch {
      return path;
    }
  }
  return null;
}

const different = firstDifference();
if (different !== null) {
  console.error(`Installing packages (${different} is missing or of another version) ...`);
  const npm = process.platform === 'win32' ? 'npm.cmd' : 'npm';
  const install = spawnSync(
    npm,
    ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'],
    { cwd: root, stdio: ['ignore', 2, 2] },
  );
  if (install.status !== 0) {
    console.error(
      'The packages could not be installed. Check that the package registry can be reached, then run the command again.',
    );
    process.exit(install.status ?? 1);
  }
}
