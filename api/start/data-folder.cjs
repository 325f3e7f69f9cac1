const { createHash } = require('node:crypto');
const { accessSync, chmodSync, constants, mkdirSync, realpathSync } = require('node:fs');
const { join } = require('node:path');
const { Refusal } = require('./refusal.cjs');

/**
 * Where a checkout keeps its data. PostgreSQL refuses to run as root and cannot enter root's home, so as root
 * the folder is a system one, told apart by the checkout's path; anyone else keeps it inside the checkout.
 * @param {{ root: string, isRoot: boolean, override?: string | undefined }} where
 * @returns {string} an absolute path
 */
function dataFolderOf({ root, isRoot, override }) {
  if (override !== undefined && override !== '') return override;
  if (!isRoot) return join(root, '.local');
  return join('/var/lib/leanyear', createHash('sha256').update(root).digest('hex').slice(0, 12));
}

/**
 * Makes the data folder and says where it is.
 * @param {string} root the checkout
 * @returns {string}
 */
function prepareDataFolder(root) {
  const folder = dataFolderOf({
    root: realpathSync(root),
    isRoot: process.getuid?.() === 0,
    override: process.env.LEANYEAR_DATA_DIR,
  });
  try {
    mkdirSync(folder, { recursive: true });
    accessSync(folder, constants.W_OK);
    // Others may pass through (PostgreSQL's own user must) but not list; each file inside has its own lock.
    chmodSync(folder, 0o711);
  } catch (error) {
    throw new Refusal(
      `Cannot write to the data folder ${folder} (${error instanceof Error ? error.message : String(error)}). ` +
        'Run the command as the user who owns the checkout, or name another folder in LEANYEAR_DATA_DIR.',
    );
  }
  return folder;
}

module.exports = { dataFolderOf, prepareDataFolder };
