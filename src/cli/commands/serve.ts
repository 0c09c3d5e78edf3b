import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import type { CommandContext } from '../context.ts';
import { dataDirOption } from './options.ts';

function portNumber(text: string): number {
  const port = Number(text);
  if (!/^\d+$/.test(text.trim()) || port > 65_535) {
    throw new LabError('usage', `--port must be a whole number from 0 to 65535, got "${text}"`, {
      input: 'port',
      value: text,
    });
  }
  return port;
}

/** `breakplane serve`: the service with its page, on this machine only. */
export function serveCommand({ ports, output }: CommandContext): Command {
  return new Command('serve')
    .description('Run the service and its page on this machine')
    .option('--port <number>', 'port to listen on; 0 takes a free one', portNumber, 8080)
    .option('--host <address>', 'loopback address to listen on', '127.0.0.1')
    .addOption(dataDirOption(ports))
    .addHelpText(
      'after',
      '\nExamples:\n  breakplane serve\n  breakplane serve --port 9000 --data /srv/torsion-lab\n\nStops with Ctrl+C; what was stored stays.',
    )
    .action(async (options: { port: number; host: string; data: string }) => {
      const service = await ports.serve({ port: options.port, host: options.host, dataDir: options.data });
      output.line(
        `Breakplane serves ${output.colours.bold(service.address)} (data in ${options.data}; stop with Ctrl+C)`,
      );
      if (service.empty && ports.programDir) {
        const samples = `${ports.programDir}/samples`;
        output.line(
          'There is no test yet. Load the demo laboratory (invented data) on the page, or with\n' +
            `  npx breakplane import ${samples}/logs/demo.csv --photos ${samples}/photos --data ${options.data}`,
        );
      }
      await service.stopped;
    });
}
