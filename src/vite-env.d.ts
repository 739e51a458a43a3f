interface ImportMetaEnv {
  /** The version in package.json, set by vite.config.ts; goes into every run's header. */
  readonly VITE_APP_VERSION: string;
}
