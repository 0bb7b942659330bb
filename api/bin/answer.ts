import { randomUUID } from 'node:crypto';
import { writeSync } from 'node:fs';
import type { z } from 'zod';
import type { Fault } from '#contract/errors.ts';
import { AppError } from '../errors.ts';
import { parsePart, toProblem } from '../http/problem.ts';

const BAD_INPUT = 2;

/** Answers one JSON request on standard output, with the reply or with a problem, and gives the exit status. */
export function answer<T extends z.ZodType>(text: string, schema: T, reply: (request: z.output<T>) => unknown): number {
  let body: unknown;
  try {
    body = JSON.parse(text);
  } catch (error) {
    const detail = `The input isn’t JSON: ${(error as Error).message}.`;
    return refuse(detail, [{ path: 'body', message: detail }]);
  }
  const { value, faults } = parsePart('body', schema, body);
  if (faults.length > 0) {
    return refuse(`${faults.length} ${faults.length === 1 ? 'field is' : 'fields are'} at fault.`, faults);
  }
  try {
    print(reply(value as z.output<T>));
    return 0;
  } catch (error) {
    if (!(error instanceof AppError)) throw error;
    return refuse(error.message, error.faults);
  }
}

function refuse(detail: string, faults: Fault[]): number {
  print(toProblem('invalid_request', detail, randomUUID(), faults));
  return BAD_INPUT;
}

/** Written in full before the process may end, however long the text and however slow the reader. */
function print(value: unknown): void {
  const bytes = Buffer.from(`${JSON.stringify(value)}\n`);
  for (let at = 0; at < bytes.length;) {
    try {
      at += writeSync(1, bytes, at);
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code !== 'EAGAIN') throw error;
    }
  }
}
