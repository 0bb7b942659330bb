import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';

/** A number for each request, in its reply and in the log, by which a person can ask about it. */
export const requestId: RequestHandler = (req, res, next) => {
  req.requestId = randomUUID();
  res.set('X-Request-Id', req.requestId);
  next();
};
