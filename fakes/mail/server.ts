import type { AddressInfo } from 'node:net';
import { createMailFake } from './app';

/**
 * Runs the mail stand-in by itself on 127.0.0.1.
 *
 * MAIL_FAKE_PORT: its port (0 for any free one); MAIL_FAKE_STORE: a file that keeps the inbox over restarts. Prints one line of
 * JSON when it is ready: {"ready": true, "url": "http://127.0.0.1:4325"}.
 */
const port = Number(process.env['MAIL_FAKE_PORT'] ?? 4325);
const { server } = createMailFake({ file: process.env['MAIL_FAKE_STORE'] || undefined });

server.on('error', (error: NodeJS.ErrnoException) => {
  console.error(error.code === 'EADDRINUSE' ? `Port ${port} is taken; set MAIL_FAKE_PORT to another.` : error.message);
  process.exit(1);
});
server.listen(port, '127.0.0.1', () => {
  console.log(JSON.stringify({ ready: true, url: `http://127.0.0.1:${(server.address() as AddressInfo).port}` }));
});

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
  process.once(signal, () => {
    server.close(() => process.exit(0));
    server.closeAllConnections();
  });
}
