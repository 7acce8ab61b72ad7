import { accessSync, constants, existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { aptInstall, isRoot } from './debian.mjs'
import { run } from './processes.mjs'
import { Refusal } from './say.mjs'

const debianHome = '/usr/lib/postgresql'

/** Newer than this are the features that the migrations use. */
const oldestMajor = 15

const installedMajors = () => {
  if (!existsSync(debianHome)) return []
  return readdirSync(debianHome)
    .map(Number)
    .filter((major) => major >= oldestMajor && existsSync(join(debianHome, String(major), 'bin', 'initdb')))
    .sort((a, b) => b - a)
}

const binOf = (major) => join(debianHome, String(major), 'bin')

/** Debian's account for the server: PostgreSQL refuses to run as root. */
const serverAccount = () => {
  if (!isRoot) return {}
  const line = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'))
  if (!line) {
    throw new Refusal(
      "PostgreSQL is here, but the account 'postgres' that should run it is not.\n" +
        "Install Debian's package again: apt-get install --reinstall postgresql-common",
    )
  }
  const [, , uid, gid] = line.split(':')
  return { uid: Number(uid), gid: Number(gid) }
}

/**
 * Finds PostgreSQL's binaries, installing Debian's package when they are missing.
 * `major` asks for the version that an existing cluster was made with.
 */
export const ensurePostgres = async ({ major } = {}) => {
  if (installedMajors().length === 0) await aptInstall(['postgresql'], 'PostgreSQL is not installed.')
  const majors = installedMajors()
  if (majors.length === 0) {
    throw new Refusal(`No PostgreSQL ${oldestMajor} or newer under ${debianHome}, even after installing it.`)
  }
  if (major !== undefined && !majors.includes(major)) {
    throw new Refusal(
      `The database of this checkout was made by PostgreSQL ${major}, but only ${majors.join(', ')} is installed.\n` +
        `Install postgresql-${major}, or take a backup with it and restore that into a new checkout.`,
    )
  }
  const chosen = major ?? majors[0]
  return { major: chosen, bin: binOf(chosen), account: serverAccount() }
}

/** Whether the account that runs the server can get into a folder. */
export const canServerReach = async ({ account }, folder) => {
  if (account.uid === undefined) {
    try {
      accessSync(folder, constants.X_OK)
      return true
    } catch {
      return false
    }
  }
  const answer = await run('/usr/bin/test', ['-x', folder], { ...account, cwd: '/' })
  return answer.code === 0
}
