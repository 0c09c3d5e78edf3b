import Database from 'better-sqlite3';

export interface CopyJob {
  readonly from: string;
  readonly to: string;
}

/** Entry of the worker that copies a database as of one moment, over a connection of its own; the store goes on writing. */
export default function copyDatabase({ from, to }: CopyJob): void {
  const database = new Database(from, { readonly: true, timeout: 10_000 });
  try {
    database.prepare('vacuum into ?').run(to);
  } finally {
    database.close();
  }
}
