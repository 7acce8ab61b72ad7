import { randomBytes } from 'node:crypto'
import {
  chmodSync,
  chownSync,
  existsSync,
  mkdirSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs'
import { join } from 'node:path'
import { freePort, isPortFree } from './ports.mjs'
import { ensurePostgres } from './postgres-binaries.mjs'
import { isRunning, pause, run, startService, startTimeOf, workingFolderOf } from './processes.mjs'
import { Refusal } from './say.mjs'

export { ensurePostgres } from './postgres-binaries.mjs'

const host = '127.0.0.1'

/**
 * admin: the cluster's superuser, for this folder's own scripts alone.
 * owner: owns the schema, runs the migrations, loads the demo's past.
 * app: the application's; what it may do is granted by the migrations.
 */
export const roles = { admin: 'weirlight_admin', owner: 'weirlight_owner', app: 'weirlight_app' }

const newSecrets = () =>
  Object.fromEntries(Object.keys(roles).map((role) => [role, randomBytes(24).toString('hex')]))

const readSecrets = (file) => {
  if (existsSync(file)) return JSON.parse(readFileSync(file, 'utf8'))
  const secrets = newSecrets()
  writeFileSync(file, JSON.stringify(secrets), { mode: 0o600 })
  return secrets
}

/** The reader's own PG* settings must not bend what these scripts do. */
const cleanEnv = () =>
  Object.fromEntries(Object.entries(process.env).filter(([key]) => !key.startsWith('PG')))

const makeCluster = async ({ postgres, pgdata, home, secrets }) => {
  // Made aside and then renamed: an interrupted initdb leaves nothing that looks like a cluster.
  const unfinished = `${pgdata}.unfinished`
  const passwordFile = join(home, 'initdb-password')
  rmSync(unfinished, { recursive: true, force: true })
  mkdirSync(unfinished, { mode: 0o700 })
  writeFileSync(passwordFile, secrets.admin, { mode: 0o600 })
  const { uid, gid } = postgres.account
  if (uid !== undefined) {
    chownSync(unfinished, uid, gid)
    chownSync(passwordFile, uid, gid)
  }
  const answer = await run(
    join(postgres.bin, 'initdb'),
    [
      `--pgdata=${unfinished}`,
      `--username=${roles.admin}`,
      `--pwfile=${passwordFile}`,
      '--auth=scram-sha-256',
      '--encoding=UTF8',
      '--locale=C.UTF-8',
      '--no-instructions',
    ],
    { ...postgres.account, cwd: unfinished, env: cleanEnv() },
  )
  rmSync(passwordFile, { force: true })
  if (answer.code !== 0) throw new Error(`initdb failed:\n${answer.output}`)
  renameSync(unfinished, pgdata)
}

/**
 * A server that outlived its launcher is stopped; a pid file left by a dead one is removed. PostgreSQL itself
 * refuses to start when the number in that file belongs to any living process of the same account.
 */
const clearPrevious = async (pgdata) => {
  const pidFile = join(pgdata, 'postmaster.pid')
  if (!existsSync(pidFile)) return
  const pid = Number(readFileSync(pidFile, 'utf8').split('\n')[0])
  const previous = { pid, startTime: startTimeOf(pid) }
  if (isRunning(previous) && workingFolderOf(pid) === pgdata) {
    process.kill(pid, 'SIGINT')
    for (let i = 0; i < 200 && isRunning(previous); i += 1) await pause(100)
    if (isRunning(previous)) {
      throw new Refusal(`An earlier PostgreSQL (process ${pid}) still holds ${pgdata} and does not stop.`)
    }
  }
  rmSync(pidFile, { force: true })
}

const settingsOf = ({ port, isThrowAway }) => {
  const settings = {
    port,
    listen_addresses: host,
    // TCP on loopback alone: nothing to clash with another cluster, no limit on the length of a path.
    unix_socket_directories: '',
    max_connections: 200,
    timezone: 'UTC',
    log_timezone: 'UTC',
    cluster_name: 'weirlight',
    ...(isThrowAway ? { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off' } : {}),
  }
  return Object.entries(settings).flatMap(([name, value]) => ['-c', `${name}=${value}`])
}

const waitUntilReady = async ({ postgres, service, port }) => {
  for (let i = 0; i < 600; i += 1) {
    if (service.hasEnded()) return false
    const answer = await run(join(postgres.bin, 'pg_isready'), ['-q', '-h', host, '-p', String(port)], {
      env: cleanEnv(),
    })
    if (answer.code === 0) return true
    await pause(100)
  }
  return false
}

/** Starts the server; when another program takes the port in the same moment, tries with the next. */
const startServer = async ({ postgres, pgdata, isThrowAway, wishedPort, watchdog, onDeath }) => {
  for (let attempt = 0; ; attempt += 1) {
    const port = await freePort(attempt === 0 ? wishedPort : undefined)
    let isUp = false
    const service = startService({
      name: 'PostgreSQL',
      command: join(postgres.bin, 'postgres'),
      args: ['-D', pgdata, ...settingsOf({ port, isThrowAway })],
      ...postgres.account,
      cwd: pgdata,
      env: cleanEnv(),
      onDeath: (death) => isUp && onDeath?.(death),
    })
    watchdog?.watch({ pid: service.pid, startTime: service.startTime, signal: 'SIGINT' })
    isUp = await waitUntilReady({ postgres, service, port })
    if (isUp) return { service, port }
    await service.stop({ signal: 'SIGINT' })
    const isPortTrouble = /Address already in use/.test(service.lastLines()) || !(await isPortFree(port))
    if (attempt >= 4 || !isPortTrouble) throw new Error(`PostgreSQL did not start:\n${service.lastLines()}`)
  }
}

/** Where a cluster keeps its files below its home. */
const layoutOf = (home) => ({
  pgdata: join(home, 'pgdata'),
  secretsFile: join(home, 'secrets.json'),
  portFile: join(home, 'port'),
})

export const hasCluster = (home) => existsSync(join(layoutOf(home).pgdata, 'PG_VERSION'))

/**
 * Makes a cluster in `home` unless there is one, starts it on 127.0.0.1, and sees to the roles.
 * `isThrowAway` trades safety against a power cut for speed. `watchdog` hears of the server's process.
 */
export const startCluster = async ({ home, isThrowAway = false, watchdog, onDeath }) => {
  const { pgdata, secretsFile, portFile } = layoutOf(home)
  const versionFile = join(pgdata, 'PG_VERSION')
  const major = existsSync(versionFile) ? Number(readFileSync(versionFile, 'utf8')) : undefined
  const postgres = await ensurePostgres(major === undefined ? {} : { major })

  // The server's account passes through this folder to its own; the secrets in it stay the caller's alone.
  mkdirSync(home, { recursive: true })
  chmodSync(home, 0o711)
  const secrets = readSecrets(secretsFile)
  if (major === undefined) await makeCluster({ postgres, pgdata, home, secrets })
  await clearPrevious(pgdata)

  const wishedPort = existsSync(portFile) ? Number(readFileSync(portFile, 'utf8')) : undefined
  const { service, port } = await startServer({
    postgres,
    pgdata,
    isThrowAway,
    wishedPort,
    watchdog,
    onDeath,
  })
  writeFileSync(portFile, String(port))

  const cluster = clusterAt({ postgres, port, secrets, service })
  await cluster.seeToRoles()
  return cluster
}

/** The cluster in `home` that another launcher runs. */
export const attachCluster = async (home) => {
  const { pgdata, secretsFile, portFile } = layoutOf(home)
  const postgres = await ensurePostgres({ major: Number(readFileSync(join(pgdata, 'PG_VERSION'), 'utf8')) })
  const secrets = readSecrets(secretsFile)
  return clusterAt({ postgres, port: Number(readFileSync(portFile, 'utf8')), secrets })
}

const clusterAt = ({ postgres, port, secrets, service }) => {
  const url = (role, database) => `postgres://${roles[role]}:${secrets[role]}@${host}:${port}/${database}`

  // By environment, not by argument: a list of processes shows arguments to everybody.
  const connectionEnv = (role, database) => ({
    PGHOST: host,
    PGPORT: String(port),
    PGUSER: roles[role],
    PGPASSWORD: secrets[role],
    PGDATABASE: database,
  })

  /** Runs SQL through psql and gives what it printed, unaligned and without headings. */
  const sql = async (statement, { database = 'postgres', role = 'admin' } = {}) => {
    const args = ['-X', '-q', '-A', '-t', '-v', 'ON_ERROR_STOP=1', '-f', '-']
    const answer = await run(join(postgres.bin, 'psql'), args, {
      input: statement,
      env: { ...cleanEnv(), ...connectionEnv(role, database) },
    })
    if (answer.code !== 0) throw new Error(`psql: ${answer.output.trim()}`)
    return answer.stdout.trim()
  }

  const hasDatabase = async (name) =>
    (await sql(`select 1 from pg_database where datname = '${name}'`)) === '1'

  return {
    bin: postgres.bin,
    port,
    url,
    connectionEnv,
    sql,
    hasDatabase,
    seeToRoles: () =>
      sql(
        [roles.owner, roles.app]
          .map((role) => {
            const password = role === roles.owner ? secrets.owner : secrets.app
            return `do $$ begin
              if not exists (select from pg_roles where rolname = '${role}') then create role ${role}; end if;
            end $$;
            alter role ${role} with login nosuperuser nocreatedb nocreaterole noreplication nobypassrls
              password '${password}';`
          })
          .join('\n'),
      ),
    /** A database owned by the owner's role, closed to everybody the migrations do not let in. */
    createDatabase: async (name, { template } = {}) => {
      await sql(`create database ${name} owner ${roles.owner} ${template ? `template ${template}` : ''}`)
      await sql(
        `revoke all on database ${name} from public; grant connect on database ${name} to ${roles.app}`,
      )
    },
    dropDatabase: (name) => sql(`drop database if exists ${name} with (force)`),
    /** PostgreSQL's fast shutdown: ends sessions, writes everything down. */
    stop: () => service?.stop({ signal: 'SIGINT', patienceMs: 30_000 }),
  }
}
