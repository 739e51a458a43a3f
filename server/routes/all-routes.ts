import { attemptRoutes } from './attempts.ts';
import { authRoutes } from './auth.ts';
import { courseBookRoutes } from './course-books.ts';
import { entryRoutes } from './entries.ts';
import { houseRoutes } from './house.ts';
import type { Route } from './route.ts';
import { runRoutes } from './runs.ts';
import { teamRoutes } from './teams.ts';

/** Every route there is: the application mounts these and no others. */
export const ALL_ROUTES: readonly Route[] = [
  ...houseRoutes,
  ...authRoutes,
  ...teamRoutes,
  ...courseBookRoutes,
  ...attemptRoutes,
  ...entryRoutes,
  ...runRoutes,
];
