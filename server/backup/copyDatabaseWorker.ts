import Database from 'better-sqlite3';

export interface CopyJob {
  readonly from: string;
  readonly to: string;
}

/** As many pages as there can be: the copy is made in one step, so that no write can come between two of them. */
const ALL_PAGES = 2 ** 31 - 1;

/** Entry of the worker that copies a database as of one moment, over a connection of its own; the store goes on writing. */
export default async function copyDatabase({ from, to }: CopyJob): Promise<void> {
  const database = new Database(from, { readonly: true, timeout: 10_000 });
  try {
    await database.backup(to, { progress: () => ALL_PAGES });
  } finally {
    database.close();
  }
}
