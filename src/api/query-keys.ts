/**
 * Keys of everything the paddock reads, in one place. All but `me` lie under the person who asked, so that two people on
 * one tablet never see each other's data. The first words name the resource: the offline cache allows by them.
 */
export const ME_KEY = ['me'] as const;

export const keys = {
  me: ME_KEY,
  user: (userId: string) => ['user', userId] as const,
  team: (userId: string, teamId: string) => ['user', userId, 'team', teamId] as const,
  garage: (userId: string, teamId: string) => ['user', userId, 'garage', teamId] as const,
  events: (userId: string, teamId: string) => ['user', userId, 'events', teamId] as const,
  runs: (userId: string, teamId: string) => ['user', userId, 'runs', teamId] as const,
  run: (userId: string, runId: string) => ['user', userId, 'run', runId] as const,
  courseBook: (userId: string, bookId: string, version: number) => ['user', userId, 'course-book', bookId, version] as const,
};
