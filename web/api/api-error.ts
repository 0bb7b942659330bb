import { Problem, type ErrorCode, type Fault } from '#contract/errors.ts';

/** A request that failed in a way its sender can read: the server's problem details, or our own when it was silent. */
export class ApiError extends Error {
  readonly problem: Problem;

  constructor(problem: Problem, options?: ErrorOptions) {
    super(problem.detail, options);
    this.name = 'ApiError';
    this.problem = problem;
  }
  get code(): ErrorCode {
    return this.problem.code;
  }
  get status(): number {
    return this.problem.status;
  }
  get requestId(): string {
    return this.problem.requestId;
  }
  get faults(): Fault[] {
    return this.problem.faults;
  }
}

const ownProblem = (status: number, code: ErrorCode, title: string, detail: string): Problem => ({
  type: 'about:blank',
  title,
  status,
  detail,
  code,
  requestId: '',
  faults: [],
});

/** The service didn't answer at all. */
export const unreachable = (cause: unknown): ApiError =>
  new ApiError(
    ownProblem(
      0,
      'unavailable',
      'No answer',
      'The service didn’t answer. Check your connection and try again; nothing was changed here.',
    ),
    { cause },
  );

/** Known before asking: the service would refuse, too. */
export const notForRole = (detail: string): ApiError =>
  new ApiError(ownProblem(403, 'not_allowed', 'Not for your role', detail));

/** The service answered with something that isn't its own form. */
export const unexpected = (status: number, cause?: unknown): ApiError =>
  new ApiError(
    ownProblem(
      status,
      status >= 500 ? 'unavailable' : 'internal',
      'Unexpected answer',
      status >= 500
        ? 'The service can’t answer just now. Wait a moment and try again.'
        : 'The service answered in a form this page doesn’t know. Reload the page; if it stays, tell your admin.',
    ),
    { cause },
  );

export const errorFrom = (status: number, json: unknown): ApiError => {
  const problem = Problem.safeParse(json);
  return problem.success ? new ApiError(problem.data) : unexpected(status, problem.error);
};
