import './index.css';
import { registerServiceWorker } from '#src/components/app-update.ts';
import { showMissingPart } from '#src/components/missing-part.ts';
import { applyTheme, currentTheme } from '#src/components/theme.ts';

/** Two bundles, one application: the path decides which is fetched, so that the cockpit never carries the paddock. */
applyTheme(currentTheme());
registerServiceWorker();

const root = document.getElementById('root');
if (root === null) throw new Error('index.html has no element with id "root"');

const inCockpit = location.pathname === '/cockpit' || location.pathname.startsWith('/cockpit/');
const world = inCockpit ? await import('./cockpit/cockpit.tsx') : await import('./paddock/paddock.tsx');
// A part missing after a deploy arrives as undefined (see `vite:preloadError` in app-update).
if (world === undefined) showMissingPart(root);
else await world.mount(root);
