export type ThreadPool = Record<string, never>;
