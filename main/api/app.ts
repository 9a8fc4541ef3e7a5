import { Hono } from 'hono';
import { errorAnswer } from './errorAnswer.ts';
import { fileRoutes } from './files.ts';
import { footageRoutes } from './footage.ts';
import { jobRoutes } from './jobs.ts';
import { LazyLog } from './lazyLog.ts';
import { logRoutes } from './log.ts';
import { OpenFootages } from './openFootages.ts';
import { programRoutes } from './program.ts';
import { ReduceJobs } from './reduceJobs.ts';
import { securityHeaders } from './securityHeaders.ts';
import type { Services } from './services.ts';
import { sheetRoutes } from './sheets.ts';
import { shellRoutes } from './shell.ts';
import { windowFiles } from './windowFiles.ts';

/** Everything the window can ask, typed end to end: `hc<AppType>(origin)` in the renderer. */
export type AppType = ReturnType<typeof apiRoutes>;

export interface App {
  /** Answers one request; hosts pass on every request that they let through. Never rejects. */
  handle(request: Request): Promise<Response>;
  /** Cancels every job, closes every footage and the log. */
  close(): Promise<void>;
}

interface State {
  readonly opened: OpenFootages;
  readonly jobs: ReduceJobs;
  readonly log: LazyLog;
}

/** The one handler behind every host: the API, and the files of the built window. */
export function makeApp(services: Services): App {
  const state: State = {
    opened: new OpenFootages(),
    jobs: new ReduceJobs(services.reduceInWorker),
    log: new LazyLog(() => services.openLog(services.logPath)),
  };
  const app = new Hono()
    .use(securityHeaders)
    .route('/', apiRoutes(services, state))
    .all('/api/*', (c) => c.notFound())
    .get('*', windowFiles(services.rendererFolder));
  app.notFound((c) =>
    c.json({ error: { code: 'routeUnknown', message: `There is no ${c.req.method} ${c.req.path}.` } }, 404),
  );
  app.onError(errorAnswer);
  return {
    handle: async (request) => app.fetch(request),
    async close() {
      await state.jobs.close();
      await state.opened.closeAll();
      await state.log.close();
    },
  };
}

function apiRoutes(services: Services, { opened, jobs, log }: State) {
  return new Hono()
    .basePath('/api')
    .route('/program', programRoutes(services))
    .route('/shell', shellRoutes(services))
    .route('/files', fileRoutes(services))
    .route('/footage', footageRoutes(services, opened))
    .route('/sheets', sheetRoutes())
    .route('/jobs', jobRoutes(jobs))
    .route('/log', logRoutes(log, jobs));
}
