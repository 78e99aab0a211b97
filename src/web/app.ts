import ejs from 'ejs';
import express, { type Express } from 'express';
import { rateLimit } from 'express-rate-limit';
import helmet from 'helmet';
import type { PageDeps, WebDeps } from './deps.js';
import { pageErrors, notFound } from './errors.js';
import { MonthRuns } from './month/month-runs.js';
import { pageLocals } from './page.js';
import { Planner } from './planner.js';
import { boardRoutes } from './routes/board.js';
import { bookingRoutes } from './routes/bookings.js';
import { consoleRoutes } from './routes/console.js';
import { doneRoutes } from './routes/done.js';
import { fillSearchRoutes } from './routes/fill-search.js';
import { fillRoutes } from './routes/fill.js';
import { learningRoutes } from './routes/learning.js';
import { libraryRoutes } from './routes/library.js';
import { liveRoutes } from './routes/live.js';
import { mendRoutes } from './routes/mend.js';
import { monthScenarioRoutes } from './routes/month-scenario.js';
import { monthRoutes } from './routes/month.js';
import { methodsRoutes } from './routes/methods.js';
import { owedRoutes } from './routes/owed.js';
import { placesRoutes } from './routes/places.js';
import { planSheetRoutes } from './routes/plan-sheet.js';
import { policyRoutes } from './routes/policy.js';
import { requestEditRoutes } from './routes/request-edit.js';
import { requestRoutes } from './routes/requests.js';
import { slotAdviceRoutes } from './routes/slot-advice.js';
import { whoRoutes } from './routes/who.js';
import { sameOriginOnly } from './same-origin.js';
import { nameNewDesk } from './who.js';

/** The pages as one application; it listens nowhere by itself. */
export function createApp(given: WebDeps): Express {
  const deps: PageDeps = { ...given, planner: new Planner(given) };
  const runs = new MonthRuns({ ...given, ...given.month });
  const app = express();
  app.disable('x-powered-by');
  app.set('views', deps.folders.views);
  app.engine('ejs', (path, data, done) => {
    void ejs.renderFile(path, data as ejs.Data, { cache: true }, done);
  });
  app.set('view engine', 'ejs');
  app.use(
    helmet({
      contentSecurityPolicy: {
        directives: {
          defaultSrc: ["'self'"],
          scriptSrc: ["'self'"],
          styleSrc: ["'self'"],
          // Places on the board are positions to scale.
          styleSrcAttr: ["'unsafe-inline'"],
          imgSrc: ["'self'", 'data:'],
          upgradeInsecureRequests: null,
        },
      },
      strictTransportSecurity: false,
    }),
  );
  app.use('/assets', express.static(deps.folders.assets, { maxAge: '1h' }));
  app.use('/client', express.static(deps.folders.client, { maxAge: 0 }));
  app.use(
    rateLimit({ windowMs: 60_000, limit: 1200, standardHeaders: true, legacyHeaders: false }),
  );
  app.use(nameNewDesk);
  app.use(pageLocals(deps));
  app.use(sameOriginOnly);
  app.use(express.json({ limit: '64kb' }));
  app.use(express.urlencoded({ extended: false, limit: '64kb' }));
  app.use(whoRoutes());
  app.use(boardRoutes(deps));
  app.use(bookingRoutes(deps));
  app.use(liveRoutes(deps));
  app.use(requestRoutes(deps));
  app.use(requestEditRoutes(deps));
  app.use(planSheetRoutes(deps));
  app.use(placesRoutes(deps));
  app.use(fillRoutes(deps));
  app.use(fillSearchRoutes(deps));
  app.use(mendRoutes(deps));
  app.use(slotAdviceRoutes(deps, runs));
  app.use(monthScenarioRoutes(deps));
  app.use(monthRoutes(deps, runs));
  app.use(owedRoutes(deps));
  app.use(doneRoutes(deps));
  app.use(consoleRoutes(deps));
  app.use(learningRoutes(deps));
  app.use(libraryRoutes(deps));
  app.use(policyRoutes(deps));
  app.use(methodsRoutes(deps));
  app.use(notFound);
  app.use(pageErrors(deps));
  return app;
}
