import { mkdir, readFile, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';

/** Another server works on the same data folder. */
export class DataFolderInUse extends Error {
  override readonly name = 'DataFolderInUse';
}

/**
 * Makes this process the only server on a data folder; returns what gives it back. The lock of a process that has gone
 * is taken over: after a crash nobody has to remove a file by hand.
 */
export async function lockDataFolder(directory: string): Promise<() => Promise<void>> {
  await mkdir(directory, { recursive: true, mode: 0o700 });
  const file = join(directory, 'server.lock');
  const own = await identityOf(process.pid);
  for (;;) {
    try {
      await writeFile(file, own, { flag: 'wx', mode: 0o600 });
      return () => rm(file, { force: true });
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
    }
    const holder = await readFile(file, 'utf8').catch(() => '');
    const pid = Number(holder.split(' ')[0]);
    if (pid > 0 && (await identityOf(pid)) === holder) {
      throw new DataFolderInUse(
        `${directory} is in use by a server that is already running (process ${pid}). Stop that one, or choose another folder with ISOLOOM_DATA_DIR.`,
      );
    }
    await rm(file, { force: true });
  }
}

/** Number and start time: numbers alone are given out again, and after a reboot soon. */
async function identityOf(pid: number): Promise<string> {
  const stat = await readFile(`/proc/${pid}/stat`, 'utf8').catch(() => null);
  if (stat === null) return `${pid} gone`;
  // Field 22 of proc(5) stat, counted after the command in brackets, which may hold spaces.
  const startTime = stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19];
  return `${pid} ${startTime}`;
}
