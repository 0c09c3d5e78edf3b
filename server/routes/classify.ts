import { classifyAngle } from '../../src/verdict/classifyAngle.ts';
import { AssessmentAnswer, ToClassify } from '../http/schemas.ts';
import type { TypedApp } from './route.ts';
import { withoutUndefined } from './withoutUndefined.ts';

/** Loads and an angle → stress, planes and failure mode; nothing is stored. */
export function classifyRoutes(app: TypedApp): void {
  app.post(
    '/api/v1/classify',
    {
      schema: {
        tags: ['classify'],
        summary: 'State the failure mode for loads and a plane angle; nothing is stored',
        body: ToClassify,
        response: { 200: AssessmentAnswer },
      },
    },
    async (request, reply) => {
      const { rule, ...angle } = request.body;
      const assessment = classifyAngle(withoutUndefined(angle), rule ? { rule: withoutUndefined(rule) } : {});
      return reply.send(assessment);
    },
  );
}
