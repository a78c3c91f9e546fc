/** What the server's own entry does around the page framework, for `astro dev`. Never part of a build. */
import type { IncomingMessage, ServerResponse } from 'node:http';
import { JOB_HANDLERS } from './job-handlers';
import { startJobs } from './jobs';
import { startListening } from './live';
import { singleton } from './singleton';
import { serveStream } from './streams';

/** Starts the services with the first request, and answers live streams. */
export async function developmentMiddleware(req: IncomingMessage, res: ServerResponse, next: (error?: unknown) => void): Promise<void> {
  await singleton('development', async () => {
    await startListening();
    await startJobs(JOB_HANDLERS);
  });
  if (!(await serveStream(req, res))) next();
}
