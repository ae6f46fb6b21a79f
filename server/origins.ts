import type { IncomingMessage } from 'node:http';

/** Listening on these means: on every address of the machine. */
export const EVERY_ADDRESS: readonly string[] = ['0.0.0.0', '::'];

/**
 * Which Host and Origin headers are ours: loopback names, the addresses listened on, and the public address.
 * Anything else is somebody else's page, or a name that was made to point here (DNS rebinding; a bare
 * address cannot be made to point anywhere, so the machine's own ones are safe to answer to).
 */
export class Origins {
  private readonly hosts: Set<string>;
  private readonly publicOrigin: string | null;
  private readonly devOrigin: string | null;
  private readonly scheme: 'http' | 'https';

  constructor(options: {
    host: string;
    publicUrl: string | null;
    devOrigin: string | null;
    secure: boolean;
    /** IP addresses of this machine, answered to when listening on all of them. */
    ownAddresses?: readonly string[];
  }) {
    const listened = EVERY_ADDRESS.includes(options.host) ? (options.ownAddresses ?? []) : [options.host];
    this.hosts = new Set(['localhost', '127.0.0.1', '[::1]', ...listened.map(asHost)]);
    if (options.publicUrl) this.hosts.add(new URL(options.publicUrl).hostname.toLowerCase());
    this.publicOrigin = options.publicUrl ? new URL(options.publicUrl).origin : null;
    this.devOrigin = options.devOrigin;
    this.scheme = options.secure ? 'https' : 'http';
  }

  hostAllowed(header: string | undefined): boolean {
    if (!header) return false;
    const name = header.toLowerCase().replace(/:\d+$/, '');
    return this.hosts.has(name);
  }

  /** The Origin names the very host and port the request went to (or the public address). */
  allows(request: IncomingMessage): boolean {
    const { origin, host } = request.headers;
    if (!origin || origin === 'null' || !this.hostAllowed(host)) return false;
    if (origin === this.publicOrigin || origin === this.devOrigin) return true;
    return origin === `${this.scheme}://${host?.toLowerCase()}`;
  }
}

/** As it stands in a Host header: IPv6 in brackets. */
function asHost(address: string): string {
  return (address.includes(':') ? `[${address}]` : address).toLowerCase();
}
