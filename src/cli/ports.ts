import type { MeasurePool } from '../photo/measurement.ts';
import type { LaboratoryRecords } from '../records/laboratoryRecords.ts';

/** A stream the commands write text to; `process.stdout` and `process.stderr` are such. */
export interface TextOutput extends NodeJS.WritableStream {
  /** True on a terminal: colours and progress bars are only shown there. */
  readonly isTTY?: boolean;
  readonly columns?: number;
}

export interface ServeOptions {
  readonly port: number;
  readonly host: string;
  readonly dataDir: string;
}

/** A service that listens. */
export interface RunningService {
  /** Address to open in a browser, e.g. `http://127.0.0.1:8080/`. */
  readonly address: string;
  /** Resolves once the service has stopped (SIGINT, SIGTERM) and its store is closed. */
  readonly stopped: Promise<void>;
  /** True when the data folder holds no test yet: the demo laboratory is then offered. */
  readonly empty?: boolean;
}

/** What a backup holds. */
export interface ArchivedLaboratory {
  readonly files: number;
  readonly bytes: number;
}

/** What the executable passes to the commands: everything in `src/cli` that is not the domain comes through here. */
export interface CliPorts {
  readonly stdout: TextOutput;
  readonly stderr: TextOutput;
  readonly env: Readonly<Record<string, string | undefined>>;
  readonly version: string;
  /** Opens (and, where needed, creates) the store in a data folder. @throws LabError when it cannot be used */
  openRecords(dataDir: string): Promise<LaboratoryRecords>;
  /** Starts measuring workers; `size` workers, by default as many as the cores allow. */
  createMeasurePool(options: { readonly size?: number }): MeasurePool;
  /** Starts the service and resolves when it listens. @throws LabError `not-loopback` */
  serve(options: ServeOptions): Promise<RunningService>;
  /** Writes everything a data folder holds into one archive with checksums. @throws LabError `busy`, `already-exists` */
  backup?(dataDir: string, archive: string): Promise<ArchivedLaboratory>;
  /** Restores such an archive into an empty data folder, whole or not at all. @throws LabError `invalid-request`, `already-exists` */
  restore?(archive: string, dataDir: string): Promise<ArchivedLaboratory>;
  /** Folder of the program, where `samples/` lies; for the hint to the demo laboratory. */
  readonly programDir?: string;
}
