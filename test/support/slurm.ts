/**
 * A Slurm of one node for a test: munged, slurmctld and slurmd in the foreground, with all of their files in one folder, on ports and sockets
 * of their own. Needs root and Debian's slurm-wlm and munge. Settings as in slurm.conf(5).
 */
import { type ChildProcess, spawn, spawnSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { mkdirSync, mkdtempSync, openSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { hostname, tmpdir } from 'node:os';
import { join } from 'node:path';

export interface Slurm {
  /** The environment in which `sbatch` and the others find it. */
  readonly environment: NodeJS.ProcessEnv;
  /** Runs one of its commands; throws when it fails. */
  command(name: string, ...args: string[]): string;
  /** Ends the daemons and removes their files. */
  stop(): Promise<void>;
}

/** What keeps a test from starting one here, or null. */
export function slurmObstacle(): string | null {
  if (process.getuid?.() !== 0) return 'needs root';
  for (const program of ['setpriv', 'munged', 'slurmctld', 'slurmd', 'sbatch', 'scontrol', 'squeue'])
    if (spawnSync('sh', ['-c', `command -v ${program}`], { env: environmentOf('') }).status !== 0)
      return `needs the Debian packages slurm-wlm, munge and util-linux: there is no ${program}`;
  return null;
}

export async function startSlurm(cores: number, megabytes: number): Promise<Slurm> {
  const folder = mkdtempSync(join(tmpdir(), 'slurm-'));
  const daemons: ChildProcess[] = [];
  const environment = environmentOf(join(folder, 'slurm.conf'));
  const start = (program: string, ...args: string[]) => {
    const log = openSync(join(folder, `${program}.out`), 'a');
    // A daemon outlives nobody: the kernel ends it when the test is killed.
    daemons.push(
      spawn('setpriv', ['--pdeathsig', 'TERM', program, ...args], {
        env: environment,
        stdio: ['ignore', log, log],
      }),
    );
  };
  const stop = async () => {
    // Jobs that are left, after a failure, end with their daemon.
    if (spawnSync('scancel', ['--user=root'], { env: environment }).status === 0)
      await new Promise((resolve) => setTimeout(resolve, 500));
    for (const daemon of daemons.reverse()) await ended(daemon);
    rmSync(folder, { recursive: true, force: true });
  };
  try {
    for (const name of ['state', 'spool']) mkdirSync(join(folder, name));
    writeFileSync(join(folder, 'munge.key'), randomBytes(1_024), { mode: 0o400 });
    writeFileSync(
      join(folder, 'slurm.conf'),
      configuration(folder, cores, megabytes, [await freePort(), await freePort()]),
    );
    start(
      'munged',
      '--foreground',
      '--force',
      ...['key', 'socket', 'pid', 'log', 'seed'].map(
        (name) => `--${name === 'socket' ? name : `${name}-file`}=${join(folder, `munge.${name}`)}`,
      ),
    );
    await until(
      'munged',
      folder,
      () => spawnSync('munge', ['-n', '-S', join(folder, 'munge.socket')]).status === 0,
    );
    start('slurmctld', '-D');
    start('slurmd', '-D');
    await until('slurmd', folder, () =>
      spawnSync('sinfo', ['-h', '-o', '%t'], { env: environment, encoding: 'utf8' }).stdout.includes('idle'),
    );
  } catch (error) {
    await stop();
    throw error;
  }
  return {
    environment,
    stop,
    command(name, ...args) {
      const { status, stdout, stderr } = spawnSync(name, args, { env: environment, encoding: 'utf8' });
      if (status !== 0) throw new Error(`${name} ${args.join(' ')}: ${stderr}`);
      return stdout;
    },
  };
}

function environmentOf(configurationFile: string): NodeJS.ProcessEnv {
  return { ...process.env, PATH: `${process.env['PATH']}:/usr/sbin:/sbin`, SLURM_CONF: configurationFile };
}

function configuration(folder: string, cores: number, megabytes: number, ports: readonly number[]): string {
  const node = hostname();
  return `ClusterName=test
SlurmctldHost=${node}(127.0.0.1)
SlurmctldPort=${ports[0]}
SlurmdPort=${ports[1]}
SlurmUser=root
SlurmdUser=root
AuthType=auth/munge
AuthInfo=socket=${folder}/munge.socket
CredType=cred/munge
StateSaveLocation=${folder}/state
SlurmdSpoolDir=${folder}/spool
SlurmctldPidFile=${folder}/slurmctld.pid
SlurmdPidFile=${folder}/slurmd.pid
SlurmctldLogFile=${folder}/slurmctld.log
SlurmdLogFile=${folder}/slurmd.log
ProctrackType=proctrack/linuxproc
TaskPlugin=task/none
MpiDefault=none
SelectType=select/cons_tres
SelectTypeParameters=CR_Core_Memory
SchedulerType=sched/backfill
JobAcctGatherType=jobacct_gather/none
AccountingStorageType=accounting_storage/none
ReturnToService=2
NodeName=${node} NodeAddr=127.0.0.1 CPUs=${cores} RealMemory=${megabytes} State=UNKNOWN
PartitionName=local Nodes=ALL Default=YES MaxTime=INFINITE State=UP
`;
}

async function freePort(): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.address();
  await new Promise((resolve) => server.close(resolve));
  return typeof address === 'object' && address !== null ? address.port : 0;
}

async function until(what: string, folder: string, ready: () => boolean): Promise<void> {
  for (let tries = 0; tries < 100; tries++) {
    if (ready()) return;
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  const log = readFileSync(join(folder, `${what}.out`), 'utf8');
  throw new Error(`${what} did not start:\n${log.slice(-2_000)}`);
}

/** TERM, and KILL for one that does not listen. */
async function ended(daemon: ChildProcess): Promise<void> {
  if (daemon.exitCode !== null || daemon.signalCode !== null) return;
  const over = new Promise((resolve) => daemon.once('exit', resolve));
  daemon.kill('SIGTERM');
  const late = setTimeout(() => daemon.kill('SIGKILL'), 10_000);
  await over;
  clearTimeout(late);
}
