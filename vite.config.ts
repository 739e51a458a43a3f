import { readFileSync } from 'node:fs';
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig, type Plugin } from 'vite';
import { VitePWA } from 'vite-plugin-pwa';

const GROUND = '#101418';
const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { readonly version: string };

/**
 * Writes which modules lie in which chunk beside the build, so that a test can hold the cockpit's bundle free of what it
 * must not carry. The folder begins with a dot: it is neither served nor precached.
 */
function moduleList(): Plugin {
  return {
    name: 'evenline:module-list',
    apply: 'build',
    generateBundle(_options, bundle) {
      const chunks = Object.values(bundle).flatMap((file) =>
        file.type === 'chunk'
          ? [{ file: file.fileName, entry: file.facadeModuleId, imports: file.imports, modules: Object.keys(file.modules) }]
          : [],
      );
      const source = JSON.stringify(chunks).replaceAll(`${process.cwd()}/`, '');
      this.emitFile({ type: 'asset', fileName: '.vite/modules.json', source });
    },
  };
}

interface ModuleGraph {
  getModuleInfo(id: string): { readonly importedIds: readonly string[] } | null;
}

/**
 * Few chunks, cut where the worlds part, instead of one for every set of modules that some pages share: each small file
 * is compressed from nothing, and the cockpit would fetch twenty.
 */
function chunkOf(id: string, graph: ModuleGraph): string | null {
  const reaches = (entry: string): boolean => staticallyReached(`${process.cwd()}/src/${entry}`, graph).has(id);
  if (id.endsWith('/src/main.tsx')) return null;
  if (reaches('main.tsx')) return 'page';
  if (!reaches('cockpit/cockpit.tsx')) return null;
  if (id.includes('/shared/') && !reaches('paddock/paddock-app.tsx')) return 'engine';
  return /\/src\/(cockpit|run)\//.test(id) ? 'run' : 'both-worlds';
}

/** In this order a chunk takes what its modules import with them. */
const CHUNKS = ['page', 'both-worlds', 'engine', 'run'];
const groups = CHUNKS.map((chunk, i) => ({
  name: (id: string, graph: ModuleGraph) => (chunkOf(id, graph) === chunk ? chunk : null),
  priority: CHUNKS.length - i,
}));

const reached = new Map<string, ReadonlySet<string>>();

function staticallyReached(entry: string, graph: ModuleGraph): ReadonlySet<string> {
  const known = reached.get(entry);
  if (known !== undefined) return known;
  const found = new Set<string>();
  const visit = (id: string): void => {
    if (found.has(id)) return;
    found.add(id);
    for (const next of graph.getModuleInfo(id)?.importedIds ?? []) visit(next);
  };
  visit(entry);
  reached.set(entry, found);
  return found;
}

const pwa = VitePWA({
  // A newer version waits until a person asks; src/components/app-update.ts registers the worker and asks.
  registerType: 'prompt',
  injectRegister: false,
  manifest: {
    id: '/',
    name: 'Evenline',
    short_name: 'Evenline',
    description: 'Pace display, plan and run sheet for closed-road, target-average-speed events',
    lang: 'en',
    start_url: '/',
    scope: '/',
    display: 'standalone',
    theme_color: GROUND,
    background_color: GROUND,
    icons: [
      { src: '/icon-192.png', sizes: '192x192', type: 'image/png' },
      { src: '/icon-512.png', sizes: '512x512', type: 'image/png' },
      { src: '/icon-maskable-512.png', sizes: '512x512', type: 'image/png', purpose: 'maskable' },
    ],
  },
  workbox: {
    globPatterns: ['**/*.{js,css,html,woff2,svg,png}'],
    // Workbox leaves files over 2 MiB out of the precache with no more than a warning; a hole there is an app that fails offline.
    maximumFileSizeToCacheInBytes: 16 * 1024 * 1024,
    navigateFallback: 'index.html',
    navigateFallbackDenylist: [/^\/api(\/|$)/, /^\/pulse-box\//],
    // The first visit is offline-ready at once; an update still waits for its prompt.
    clientsClaim: true,
    cleanupOutdatedCaches: true,
  },
});

export default defineConfig({
  define: { 'import.meta.env.VITE_APP_VERSION': JSON.stringify(version) },
  plugins: [react(), tailwindcss(), pwa, moduleList()],
  build: {
    target: 'chrome122',
    // The content security policy allows no data: scripts or fonts, so nothing is inlined.
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    manifest: true,
    reportCompressedSize: false,
    rolldownOptions: {
      // Constants as constants: the minifier writes their values where they are used, which it does not do with a `var`.
      optimization: { inlineConst: { mode: 'all' } },
      output: { topLevelVar: false, codeSplitting: { groups } },
    },
  },
  worker: { format: 'es' },
  server: {
    host: '127.0.0.1',
    port: Number(process.env['DEV_PORT'] ?? 5173),
    proxy: { '/api': { target: `http://127.0.0.1:${process.env['PORT'] ?? 4100}`, changeOrigin: false } },
  },
});
