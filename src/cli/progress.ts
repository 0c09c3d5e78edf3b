import { SingleBar } from 'cli-progress';
import type { CliOutput } from './output.ts';

/** The progress of long work, as far as anybody looks at it. */
export interface ShownProgress {
  /** One piece is done. */
  step(): void;
  /** So many pieces are done, of so many in all (as far as is known). */
  at(done: number, total: number): void;
  /** Takes the bar away while something is written, then shows it again. */
  pauseFor(write: () => void): void;
  end(): void;
}

const NOTHING: ShownProgress = { step: () => {}, at: () => {}, pauseFor: (write) => write(), end: () => {} };

/** A bar on standard error when that is a terminal and there is more than one piece of work; otherwise nothing. */
export function showProgress(output: CliOutput, what: string, total: number): ShownProgress {
  const terminal = output.progressTerminal;
  if (!terminal || total === 1) return NOTHING;
  const bar = new SingleBar({
    stream: terminal,
    format: `{bar} {value}/{total} ${what}, {eta_formatted} left`,
    barCompleteChar: '█',
    barIncompleteChar: '░',
    barsize: 30,
    clearOnComplete: true,
    hideCursor: true,
    gracefulExit: false,
    forceRedraw: true,
  });
  bar.start(total, 0);
  let done = 0;
  let of = total;
  return {
    step() {
      bar.update(++done);
    },
    at(pieces, inAll) {
      done = pieces;
      of = inAll;
      bar.setTotal(of);
      bar.update(done);
    },
    pauseFor(write) {
      // Clears the line, writes, and draws again: a result never ends up behind the bar.
      terminal.write('\r\u001B[2K');
      write();
      bar.render();
    },
    end() {
      bar.stop();
    },
  };
}
