import { z } from 'zod';

const port = z.coerce.number().int().min(1).max(65_535);
const optional = <T extends z.ZodType>(value: T) =>
  z.preprocess((given) => (given === '' ? undefined : given), value.optional());
const secret = z.string().min(32, 'must be at least 32 characters');

const Environment = z
  .object({
    NODE_ENV: z.enum(['development', 'test', 'production']),
    PORT: port,
    /** Address people reach the service at, without a slash at its end. */
    PUBLIC_URL: z.url().transform((url) => url.replace(/\/$/, '')),
    /** As the app role: no ownership, row-level security in force. */
    DATABASE_URL: z.string().regex(/^postgres(ql)?:\/\//, 'must be a postgres:// address'),
    TOKEN_SECRET: secret,
    CSRF_SECRET: secret,
    /** How many proxies of ours stand in front, for the caller's true address. */
    TRUSTED_PROXIES: optional(z.coerce.number().int().min(0).max(5)),
    LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
    SMTP_URL: z.string().regex(/^smtps?:\/\//, 'must be an smtp:// address'),
    MAIL_FROM: z.string().min(3),
    /** Folder in which the local mail sink keeps what it received. */
    MAIL_SINK_FOLDER: optional(z.string()),
    STRIPE_SECRET_KEY: z.string().min(8),
    STRIPE_WEBHOOK_SECRET: z.string().min(8),
    /** Address of the local payment stand-in; absent, the real provider is called. */
    STRIPE_API_URL: optional(z.url()),
    /** Threads a worker scores sites with; absent, two. Results don't depend on it. */
    COMPUTE_THREADS: optional(z.coerce.number().int().min(1).max(256)),
    /** Hours after which a track from an advisory counts as stale; absent, six. */
    STALE_AFTER_HOURS: optional(z.coerce.number().gt(0).max(8760)),
  })
  .superRefine(
    (values, check) => {
      if (values.NODE_ENV !== 'production') return;
      const refuse = (path: string, message: string) => check.addIssue({ code: 'custom', path: [path], message });
      if (values.STRIPE_API_URL) refuse('STRIPE_API_URL', 'the payment stand-in is not for production');
      if (values.MAIL_SINK_FOLDER) refuse('MAIL_SINK_FOLDER', 'the mail sink is not for production');
      if (URL.canParse(values.PUBLIC_URL) && !values.PUBLIC_URL.startsWith('https://'))
        refuse('PUBLIC_URL', 'must be https:// in production');
    },
    // Also when single values are at fault, so that one start names everything.
    { when: () => true },
  );

export interface Config {
  readonly environment: 'development' | 'test' | 'production';
  readonly port: number;
  readonly publicUrl: string;
  readonly databaseUrl: string;
  readonly tokenSecret: string;
  readonly csrfSecret: string;
  readonly trustedProxies: number;
  readonly logLevel: string;
  readonly mail: { readonly smtpUrl: string; readonly from: string; readonly sinkFolder: string | null };
  readonly stripe: { readonly secretKey: string; readonly webhookSecret: string; readonly apiUrl: string | null };
  readonly computeThreads: number | null;
  readonly staleAfterHours: number;
}

/** Reads the environment once; a bad or missing value stops the start, and all of them are named. */
export const readConfig = (environment: NodeJS.ProcessEnv): Config => {
  const read = Environment.safeParse(environment);
  if (!read.success) {
    const faults = read.error.issues.map(({ path, message }) => `  ${path.join('.')}: ${message}`);
    throw new Error(`The configuration isn’t usable:\n${faults.join('\n')}`);
  }
  const values = read.data;
  return Object.freeze({
    environment: values.NODE_ENV,
    port: values.PORT,
    publicUrl: values.PUBLIC_URL,
    databaseUrl: values.DATABASE_URL,
    tokenSecret: values.TOKEN_SECRET,
    csrfSecret: values.CSRF_SECRET,
    trustedProxies: values.TRUSTED_PROXIES ?? 0,
    logLevel: values.LOG_LEVEL,
    mail: Object.freeze({
      smtpUrl: values.SMTP_URL,
      from: values.MAIL_FROM,
      sinkFolder: values.MAIL_SINK_FOLDER ?? null,
    }),
    stripe: Object.freeze({
      secretKey: values.STRIPE_SECRET_KEY,
      webhookSecret: values.STRIPE_WEBHOOK_SECRET,
      apiUrl: values.STRIPE_API_URL ?? null,
    }),
    computeThreads: values.COMPUTE_THREADS ?? null,
    staleAfterHours: values.STALE_AFTER_HOURS ?? 6,
  });
};
