import { OpenApiGeneratorV31, OpenAPIRegistry, type RouteConfig } from '@asteasolutions/zod-to-openapi';
import { z } from 'zod';
import { ALL_ENDPOINTS } from '#contract/all.ts';
import type { Endpoint } from '#contract/endpoint.ts';
import { Problem } from '#contract/errors.ts';
import { CHAIN_CHOICES, WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';

const object = (schema: z.ZodType | undefined) => (schema instanceof z.ZodObject ? schema : undefined);

const whoMay = ({ access }: Endpoint): string =>
  access === 'public'
    ? 'Anyone.'
    : access === 'session'
      ? 'Anyone signed in.'
      : access === 'member'
        ? 'Anyone signed in who has accepted the standing notes.'
        : `Roles: ${access.join(', ')}.`;

const headersOf = (endpoint: Endpoint) =>
  z.object({
    ...(endpoint.method !== 'get' && { 'X-CSRF-Token': z.string().optional() }),
    ...(endpoint.idempotent && { 'Idempotency-Key': z.string().min(8).max(200) }),
  });

const bodyOf = (endpoint: Endpoint): { request: NonNullable<RouteConfig['request']>['body'] } | null => {
  if (endpoint.upload) {
    const schema = z.object({ file: z.string().meta({ format: 'binary' }) });
    return { request: { content: { 'multipart/form-data': { schema } }, required: true } };
  }
  return endpoint.body
    ? { request: { content: { 'application/json': { schema: endpoint.body } }, required: true } }
    : null;
};

const responseOf = (endpoint: Endpoint): RouteConfig['responses'][number] =>
  endpoint.status === 204
    ? { description: 'Done.' }
    : {
        description: endpoint.stream === 'text/event-stream' ? 'Events, each of this form.' : 'Done.',
        content: { [endpoint.stream ?? 'application/json']: { schema: endpoint.response } },
      };

const CHOICES = new Map([...WIND_CHOICES, ...CHAIN_CHOICES].map((choice) => [choice.key as string, choice]));

/** Gives every published relation that can be chosen its words, wherever it stands in the document. */
const describeChoices = (node: unknown): void => {
  if (typeof node !== 'object' || node === null) return;
  Object.values(node).forEach(describeChoices);
  const { properties } = node as { properties?: Record<string, { enum?: string[]; description?: string }> };
  for (const [key, schema] of Object.entries(properties ?? {})) {
    const choice = CHOICES.get(key);
    if (!choice || !choice.values.every(({ value }) => schema.enum?.includes(value))) continue;
    const values = choice.values.map(({ value, title, source }) => `- \`${value}\`: ${title}. ${source}.`);
    schema.description = [`${choice.title}. ${choice.meaning}`, choice.reason, values.join('\n')].join('\n\n');
  }
};

/** The contract as OpenAPI 3.1. */
export const openApiDocument = (publicUrl: string): object => {
  const registry = new OpenAPIRegistry();
  for (const endpoint of ALL_ENDPOINTS) {
    registry.registerPath({
      operationId: endpoint.id,
      method: endpoint.method,
      path: endpoint.path.replace(/:(\w+)/g, '{$1}'),
      summary: endpoint.summary,
      description: whoMay(endpoint),
      tags: [endpoint.path.split('/')[1] ?? ''],
      request: {
        params: object(endpoint.params),
        query: object(endpoint.query),
        headers: headersOf(endpoint),
        ...(bodyOf(endpoint) && { body: bodyOf(endpoint)!.request }),
      },
      responses: {
        [endpoint.status]: responseOf(endpoint),
        default: {
          description: 'What went wrong, as problem details (RFC 9457).',
          content: { 'application/problem+json': { schema: Problem } },
        },
      },
    });
  }
  const document = new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Gustloom',
      version: '1',
      description:
        'Peak gust and loss ranges for insured sites under a storm track. Scenario study for insurance work: not a forecast, a warning or a guide to evacuation.',
    },
    servers: [{ url: `${publicUrl}/api/v1` }],
  });
  describeChoices(document);
  return document;
};
