import * as z from 'zod';

const flag = z
  .enum(['0', '1'])
  .default('0')
  .transform((value) => value === '1');

const Environment = z.object({
  NODE_ENV: z.enum(['development', 'production', 'test']).default('production'),
  /** Connection of the app role, which row security binds. */
  DATABASE_URL: z.string().regex(/^postgres(?:ql)?:\/\//),
  /** Signs session cookies; 32 random bytes in base64url. */
  HUBTACK_SECRET: z.string().min(43),
  HOST: z.string().default('127.0.0.1'),
  PORT: z.coerce.number().int().min(0).max(65535).default(3000),
  /** Address that people and programs use, for cookies and same-origin checks. */
  HUBTACK_PUBLIC_URL: z.url().optional(),
  /** Set where a proxy in front states the client's address in X-Forwarded-For. */
  HUBTACK_TRUST_PROXY: flag,
  /** Checks every answer against its contract; always on in tests. */
  HUBTACK_VALIDATE_ANSWERS: flag,
  /** Lets webhooks go out without encryption. */
  HUBTACK_WEBHOOK_HTTP: flag,
  /** Blocks of addresses in CIDR notation, by commas, that webhooks reach beside the public ones. */
  HUBTACK_WEBHOOK_NETWORKS: z
    .string()
    .default('')
    .transform((text) => text.split(',').flatMap((block) => block.trim() || []))
    .pipe(z.array(z.union([z.cidrv4(), z.cidrv6()]))),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
});

function read() {
  const parsed = Environment.safeParse(process.env);
  if (!parsed.success) {
    const places = parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
    throw new Error(`The environment is not complete. ${places.join('; ')}`);
  }
  const env = parsed.data;
  return {
    mode: env.NODE_ENV,
    databaseUrl: env.DATABASE_URL,
    secret: env.HUBTACK_SECRET,
    host: env.HOST,
    port: env.PORT,
    publicUrl: env.HUBTACK_PUBLIC_URL ?? null,
    trustProxy: env.HUBTACK_TRUST_PROXY,
    validateAnswers: env.HUBTACK_VALIDATE_ANSWERS,
    webhookHttp: env.HUBTACK_WEBHOOK_HTTP,
    webhookNetworks: env.HUBTACK_WEBHOOK_NETWORKS,
    logLevel: env.LOG_LEVEL,
  } as const;
}

export type Config = ReturnType<typeof read>;

let config: Config | undefined;

/** The environment, parsed once, at first use: a build needs none. */
export function getConfig(): Config {
  config ??= read();
  return config;
}
