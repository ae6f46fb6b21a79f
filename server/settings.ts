import { randomBytes } from 'node:crypto';

export interface Settings {
  port: number;
  host: string;
  dataFolder: string;
  publicUrl: string | null;
  tls: { cert: string; key: string } | null;
  /** Pages are reached over TLS, ours or a proxy's. */
  secure: boolean;
  plainOnNetwork: boolean;
  smtpUrl: string | null;
  mailFrom: string;
  demo: boolean;
  /** Where Vite serves the page in development. */
  devOrigin: string | null;
}

const LOOPBACK = new Set(['127.0.0.1', 'localhost', '::1']);

/**
 * Reads the environment.
 * @throws Error in plain words for settings that cannot work or would put the arm on a network unprotected
 */
export function readSettings(env: NodeJS.ProcessEnv, argv: readonly string[]): Settings {
  const demo = argv.includes('--demo');
  const port = Number(env.PORT ?? 4310);
  if (!Number.isInteger(port) || port < 0 || port > 65535) throw new Error(`PORT is not a port: ${env.PORT}`);
  const host = env.HOST ?? '127.0.0.1';
  const publicUrl = env.ELBOWROOM_URL ?? null;
  if (publicUrl && !URL.canParse(publicUrl)) throw new Error(`ELBOWROOM_URL is not an address: ${publicUrl}`);
  if (Boolean(env.TLS_CERT) !== Boolean(env.TLS_KEY))
    throw new Error('TLS_CERT and TLS_KEY belong together: give both or neither.');
  const tls = env.TLS_CERT && env.TLS_KEY ? { cert: env.TLS_CERT, key: env.TLS_KEY } : null;
  const secure = tls !== null || (publicUrl?.startsWith('https:') ?? false);
  const plainOnNetwork = !LOOPBACK.has(host) && !secure;
  if (plainOnNetwork && env.ELBOWROOM_PLAIN_HTTP !== '1')
    throw new Error(
      `HOST=${host} opens Elbowroom to a network. Give TLS_CERT and TLS_KEY, or an https ELBOWROOM_URL of a proxy in front, or accept plain HTTP with ELBOWROOM_PLAIN_HTTP=1.`,
    );
  return {
    port,
    host,
    dataFolder: env.ELBOWROOM_DATA ?? (demo ? './demo-data' : './data'),
    publicUrl,
    tls,
    secure,
    plainOnNetwork,
    smtpUrl: env.SMTP_URL ?? null,
    mailFrom: env.MAIL_FROM ?? 'Elbowroom <elbowroom@localhost>',
    demo,
    devOrigin: env.ELBOWROOM_DEV === '1' ? 'http://localhost:4311' : null,
  };
}

/** 64 random bits in four groups, easy to type from a terminal. */
export function readablePassword(): string {
  return randomBytes(8).toString('hex').match(/.{4}/g)!.join('-');
}
