import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import type { CommandContext } from '../context.ts';
import { dataDirOption } from './options.ts';

const shownSize = (bytes: number): string => `${(bytes / 1e6).toFixed(1)} MB`;

/** A program that was put together without a store cannot back up. */
function needed<Port>(port: Port | undefined, what: string): Port {
  if (port) return port;
  throw new LabError('usage', `${what} must be part of this program, got one without it`);
}

/** `breakplane backup`: everything the laboratory keeps → one archive. */
export function backupCommand({ ports, output }: CommandContext): Command {
  return new Command('backup')
    .description('Write everything the laboratory keeps (tests, readings, photos, history) into one archive')
    .argument('<archive>', 'file to write, such as laboratory.tar')
    .addOption(dataDirOption(ports))
    .addHelpText(
      'after',
      '\nExample:\n  breakplane backup laboratory.tar --data /srv/torsion-lab\n\nEvery file in the archive has its checksum. While the service runs, fetch the same archive from it:\n/api/v1/exports/backup.tar',
    )
    .action(async (archive: string, flags: { data: string }) => {
      const { files, bytes } = await needed(ports.backup, 'backup').call(ports, flags.data, archive);
      output.line(`${files} files, ${shownSize(bytes)} → ${archive}`);
    });
}

/** `breakplane restore`: such an archive → an empty data folder. */
export function restoreCommand({ ports, output }: CommandContext): Command {
  return new Command('restore')
    .description('Restore an archive of "backup" into an empty data folder')
    .argument('<archive>', 'archive to restore')
    .addOption(dataDirOption(ports))
    .addHelpText(
      'after',
      '\nExample:\n  breakplane restore laboratory.tar --data /srv/torsion-lab-restored\n\nEvery file is held against its checksum; the folder appears whole or not at all.',
    )
    .action(async (archive: string, flags: { data: string }) => {
      const { files, bytes } = await needed(ports.restore, 'restore').call(ports, archive, flags.data);
      output.line(`${files} files, ${shownSize(bytes)}, all checksums right → ${flags.data}`);
    });
}
