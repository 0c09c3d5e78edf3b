import pico from 'picocolors';
import type { CliPorts, TextOutput } from './ports.ts';

/** Where a command writes: results to standard output, everything said beside them to standard error. */
export interface CliOutput {
  /** Writes text and a line break to standard output. Does nothing once the reader has gone. */
  line(text: string): void;
  /** Writes text and a line break to standard error. */
  say(text: string): void;
  /** True once the reader of standard output has gone (`breakplane measure … | head -1`): stop working for it. */
  readonly readerGone: boolean;
  readonly colours: ReturnType<typeof pico.createColors>;
  readonly errorColours: ReturnType<typeof pico.createColors>;
  /** Standard error when it is a terminal, for a progress bar; null otherwise. */
  readonly progressTerminal: TextOutput | null;
  /** Resolves when all that was written has left. */
  flush(): Promise<void>;
}

/** Colours only on a terminal; `NO_COLOR` (not empty) and `TERM=dumb` switch them off. */
export function showsColours(stream: TextOutput, env: CliPorts['env']): boolean {
  return stream.isTTY === true && !env.NO_COLOR && env.TERM !== 'dumb';
}

const drained = (stream: TextOutput): Promise<void> =>
  new Promise((resolve) => {
    if (!stream.writable) return resolve();
    stream.once('close', resolve);
    stream.write('', () => resolve());
  });

/** Writes through the ports; a closed pipe ends the output quietly instead of crashing the program. */
export function openOutput(ports: CliPorts): CliOutput {
  let readerGone = false;
  let errorReaderGone = false;
  ports.stdout.on('error', () => {
    readerGone = true;
  });
  ports.stderr.on('error', () => {
    errorReaderGone = true;
  });
  return {
    line(text) {
      if (!readerGone) ports.stdout.write(`${text}\n`);
    },
    say(text) {
      if (!errorReaderGone) ports.stderr.write(`${text}\n`);
    },
    get readerGone() {
      return readerGone;
    },
    colours: pico.createColors(showsColours(ports.stdout, ports.env)),
    errorColours: pico.createColors(showsColours(ports.stderr, ports.env)),
    progressTerminal: ports.stderr.isTTY === true ? ports.stderr : null,
    async flush() {
      if (!readerGone) await drained(ports.stdout);
      if (!errorReaderGone) await drained(ports.stderr);
    },
  };
}
