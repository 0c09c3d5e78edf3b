import type { IncomingMessage, ServerResponse } from 'node:http';
import type { FastifyBaseLogger, FastifyInstance, FastifyTypeProvider, RawServerDefault } from 'fastify';
import type { z } from 'zod';

type Frozen<T> = T extends readonly unknown[] | object ? { readonly [K in keyof T]: Frozen<T[K]> } : T;

/** Types of requests and answers from the zod schemas of a route; an answer may be made of what cannot be changed. */
interface SchemaTypes extends FastifyTypeProvider {
  readonly validator: this['schema'] extends z.ZodType ? z.output<this['schema']> : unknown;
  readonly serializer: this['schema'] extends z.ZodType ? Frozen<z.output<this['schema']>> : unknown;
}

/** The application with types from the zod schemas of its routes. */
export type TypedApp = FastifyInstance<
  RawServerDefault,
  IncomingMessage,
  ServerResponse,
  FastifyBaseLogger,
  SchemaTypes
>;
