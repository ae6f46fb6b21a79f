import type { IncomingMessage } from 'node:http';

/**
 * Which Host and Origin headers are ours: loopback names, the address listened on, and the public address.
 * Anything else is somebody else's page, or a name that was made to point here (DNS rebinding).
 */
export class Origins {
  private readonly hosts: Set<string>;

  constructor(options: { host: string; publicUrl: string | null; devOrigin: string | null }) {
    this.hosts = new Set(['localhost', '127.0.0.1', '[::1]']);
    if (options.host !== '0.0.0.0' && options.host !== '::') this.hosts.add(options.host.toLowerCase());
    if (options.publicUrl) this.hosts.add(new URL(options.publicUrl).hostname.toLowerCase());
    this.publicOrigin = options.publicUrl ? new URL(options.publicUrl).origin : null;
    this.devOrigin = options.devOrigin;
  }

  private readonly publicOrigin: string | null;
  private readonly devOrigin: string | null;

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
    return origin === `http://${host}` || origin === `https://${host}`;
  }
}
