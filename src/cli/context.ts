import type { ExitStatus } from './exitStatus.ts';
import type { CliOutput } from './output.ts';
import type { CliPorts } from './ports.ts';

/** What every command works with. A command that did its job only in part sets `status`. */
export interface CommandContext {
  readonly ports: CliPorts;
  readonly output: CliOutput;
  status: ExitStatus;
}
