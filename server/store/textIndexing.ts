import type { LaboratoryStore } from './laboratoryStore.ts';

/** Between two batches others have their turn, ms. */
const NEXT_BATCH_MS = 50;
/** How often new tests are looked for, ms. */
const LOOK_MS = 2000;

/** Keeps the text index in step while the service runs. @returns how to stop it */
export function startTextIndexing(store: LaboratoryStore, onFault: (error: unknown) => void): () => Promise<void> {
  let timer: NodeJS.Timeout | undefined;
  let stopped = false;
  let running: Promise<void> = Promise.resolve();
  const turn = async (): Promise<void> => {
    const indexed = await store.indexTexts().catch((error: unknown) => {
      onFault(error);
      return 0;
    });
    next(indexed > 0 ? NEXT_BATCH_MS : LOOK_MS);
  };
  const next = (inMs: number): void => {
    if (stopped) return;
    timer = setTimeout(() => {
      running = turn();
    }, inMs);
    timer.unref();
  };
  next(NEXT_BATCH_MS);
  return async () => {
    stopped = true;
    clearTimeout(timer);
    await running;
  };
}
