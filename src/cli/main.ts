import { Command, CommanderError } from 'commander';
import { LabError } from '../errors.ts';
import { backupCommand, restoreCommand } from './commands/backup.ts';
import { classifyCommand } from './commands/classify.ts';
import { importCommand } from './commands/import.ts';
import { measureCommand } from './commands/measure.ts';
import { reportCommand } from './commands/report.ts';
import { serveCommand } from './commands/serve.ts';
import { statisticsCommand } from './commands/statistics.ts';
import type { CommandContext } from './context.ts';
import { EXIT } from './exitStatus.ts';
import { openOutput, showsColours } from './output.ts';
import type { CliPorts } from './ports.ts';

const COMMANDS = [
  measureCommand,
  classifyCommand,
  importCommand,
  reportCommand,
  statisticsCommand,
  serveCommand,
  backupCommand,
  restoreCommand,
];

function buildProgram(context: CommandContext): Command {
  const { ports } = context;
  const program = new Command('breakplane')
    .description(
      'Measures the plane of the break on torsion specimens, predicts the planes of largest shear and normal ' +
        'stress, and states the failure mode with its uncertainty.',
    )
    .version(ports.version)
    .exitOverride()
    .configureOutput({
      writeOut: (text) => ports.stdout.write(text),
      writeErr: (text) => ports.stderr.write(text),
      getOutHelpWidth: () => ports.stdout.columns ?? 100,
      getErrHelpWidth: () => ports.stderr.columns ?? 100,
      getOutHasColors: () => showsColours(ports.stdout, ports.env),
      getErrHasColors: () => showsColours(ports.stderr, ports.env),
    })
    .showHelpAfterError('(more with --help)');
  for (const command of COMMANDS) program.addCommand(command(context).copyInheritedSettings(program));
  return program;
}

const HELP_CODES = new Set(['commander.helpDisplayed', 'commander.version']);

function reportFailure(error: unknown, context: CommandContext): number {
  const { output, ports } = context;
  const red = output.errorColours.red;
  if (error instanceof CommanderError) {
    return HELP_CODES.has(error.code) || (error.code === 'commander.help' && error.exitCode === 0)
      ? EXIT.done
      : EXIT.usage;
  }
  if (error instanceof LabError) {
    output.say(`${red('breakplane:')} ${error.message}`);
    output.say(error.fix);
    return EXIT.usage;
  }
  output.say(`${red('breakplane: fault of the program:')} ${error instanceof Error ? error.message : String(error)}`);
  if (ports.env.BREAKPLANE_DEBUG && error instanceof Error && error.stack) output.say(error.stack);
  else output.say('Run again with BREAKPLANE_DEBUG=1 to see where; nothing was stored half.');
  return EXIT.fault;
}

/**
 * Runs one command line.
 * @param argv the arguments after the program's name
 * @returns exit status: 0 done, 2 wrong usage or input, 3 partly (a photo not measured, a row refused), 70 fault
 */
export async function runCli(argv: readonly string[], ports: CliPorts): Promise<number> {
  const output = openOutput(ports);
  const context: CommandContext = { ports, output, status: EXIT.done };
  let status: number;
  try {
    await buildProgram(context).parseAsync([...argv], { from: 'user' });
    status = context.status;
  } catch (error) {
    status = reportFailure(error, context);
  }
  await output.flush();
  return status;
}
