import type { Department } from '../day/index.js';
import type { SitePolicy } from '../exams/index.js';
import type { ChoiceSolver, PlanningGround } from '../planning/index.js';
import type { Store } from '../store/index.js';
import type { Planner } from './planner.js';

/** What the pages are made from; everything with a clock, a file or a connection comes in here. */
export interface WebDeps {
  readonly store: Store;
  readonly ground: PlanningGround;
  /** The policy as its file has it; the ground's may hold the site's own records in the place of priors. */
  readonly writtenPolicy?: SitePolicy;
  readonly department: Department;
  readonly solver: ChoiceSolver;
  /** Epoch milliseconds. */
  readonly now: () => number;
  /** Folder that holds the EJS views, and folders of static files. */
  readonly folders: { readonly views: string; readonly assets: string; readonly client: string };
  /** Threads that months are simulated in, and their compiled file where it is not beside the pool. */
  readonly month: { readonly threads: number; readonly workerFile?: URL };
  /** Writes one line about a fault; never patient data. */
  readonly log: (line: string, detail?: Record<string, unknown>) => void;
}

/** What routes get: the above and the one planner they share. */
export interface PageDeps extends WebDeps {
  readonly planner: Planner;
}
