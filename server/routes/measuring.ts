import type { ServerResponse } from 'node:http';
import { z } from 'zod';
import { ENGINE_VERSION } from '../../src/photo/measurement.ts';
import { MeasuringAnswer } from '../http/schemas.ts';
import type { Service } from '../service.ts';
import type { TypedApp } from './route.ts';

const TAG = { tags: ['measuring'] };
/** At most this often is progress sent, ms. */
const SEND_EVERY_MS = 500;
/** A line that says nothing keeps the connection open, ms. */
const STILL_HERE_MS = 15_000;

/** The measuring of photos in the background: progress, pause, cancel, measure all again. */
export function measuringRoutes(app: TypedApp, { store, measuring }: Service): void {
  app.get(
    '/api/v1/measuring',
    { schema: { ...TAG, summary: 'How far the measuring of photos is', response: { 200: MeasuringAnswer } } },
    () => measuring.progress(),
  );

  const listening = new Set<ServerResponse>();
  // A page that listens must not keep the service from stopping.
  app.addHook('preClose', async () => {
    for (const response of listening) response.end();
  });

  app.get(
    '/api/v1/measuring/events',
    { schema: { ...TAG, summary: 'The same as server-sent events (text/event-stream), one after every change' } },
    async (request, reply) => {
      reply.hijack();
      const { raw } = reply;
      raw.writeHead(200, {
        ...headersOf(reply.getHeaders()),
        'content-type': 'text/event-stream; charset=utf-8',
        'cache-control': 'no-store',
      });
      let due: NodeJS.Timeout | null = null;
      const send = async (): Promise<void> => {
        try {
          const progress = await measuring.progress();
          if (!raw.writableEnded) raw.write(`event: progress\ndata: ${JSON.stringify(progress)}\n\n`);
        } catch (error) {
          request.log.warn({ err: error }, 'progress could not be sent');
          raw.end();
        }
      };
      const soon = (): void => {
        due ??= setTimeout(() => {
          due = null;
          void send();
        }, SEND_EVERY_MS);
      };
      const stopListening = measuring.onChange(soon);
      const still = setInterval(() => raw.write(': still here\n\n'), STILL_HERE_MS);
      listening.add(raw);
      raw.on('close', () => {
        listening.delete(raw);
        stopListening();
        clearInterval(still);
        if (due) clearTimeout(due);
      });
      await send();
    },
  );

  for (const [action, summary] of [
    ['pause', 'Let the photos of imports wait; a photo that is sent for a test is measured all the same'],
    ['resume', 'Go on measuring'],
    ['cancel', 'Take everything that waits out of the queue; the photos stay'],
    ['again', 'Measure every photo again that the engine of today has not measured; earlier readings stay'],
  ] as const) {
    app.post(
      `/api/v1/measuring/${action}`,
      {
        schema: {
          ...TAG,
          summary,
          response: { 200: MeasuringAnswer.extend({ changed: z.number().int().describe('photos this concerns') }) },
        },
      },
      async () => {
        let changed = 0;
        if (action === 'pause') measuring.pause();
        if (action === 'resume') measuring.resume();
        if (action === 'cancel') changed = await measuring.cancel();
        if (action === 'again') {
          changed = await store.measuring.addOlderThan(ENGINE_VERSION);
          measuring.wake();
        }
        return { ...(await measuring.progress()), changed };
      },
    );
  }
}

const headersOf = (headers: Record<string, number | string | string[] | undefined>) =>
  Object.fromEntries(Object.entries(headers).flatMap(([name, value]) => (value === undefined ? [] : [[name, value]])));
