import type { FastifyInstance } from 'fastify';
import { LabError } from '../../src/errors.ts';

/** Names and addresses of this machine for itself. */
const LOOPBACK_HOSTS = new Set(['127.0.0.1', 'localhost', '[::1]', '::1']);

/**
 * There are no accounts yet, so that whoever reaches the service may do everything: it stays on this machine.
 * @throws LabError `not-loopback`
 */
export function requireLoopback(host: string): void {
  if (LOOPBACK_HOSTS.has(host.toLowerCase()) || /^127(\.\d{1,3}){3}$/.test(host)) return;
  throw new LabError(
    'not-loopback',
    `--host must be a loopback address (127.0.0.1, ::1, localhost), got "${host}" (not-loopback)`,
    { input: '--host', value: host },
  );
}

const hostNameOf = (host: string): string => host.replace(/:\d+$/, '').toLowerCase();

const isOwnHost = (host: string): boolean => {
  const name = hostNameOf(host);
  return LOOPBACK_HOSTS.has(name) || /^127(\.\d{1,3}){3}$/.test(name);
};

/** The page of another site must not reach the service, neither by a name that points here nor by a request of its own. */
export function refuseForeigners(app: FastifyInstance): void {
  app.addHook('onRequest', async (request) => {
    const { host = '', origin } = request.headers;
    if (!isOwnHost(host)) {
      throw new LabError('foreign-host', `the Host header must name this machine, got "${host}"`, {
        input: 'Host',
        value: host,
      });
    }
    const crossSite = request.headers['sec-fetch-site'] === 'cross-site' && request.url.startsWith('/api/');
    if (crossSite || (origin !== undefined && origin.toLowerCase() !== `http://${host.toLowerCase()}`)) {
      throw new LabError(
        'foreign-origin',
        `the request must come from the page of this service, got one from "${origin ?? 'another site'}"`,
        { input: 'Origin', value: origin },
      );
    }
  });
}
