import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'astro/config';

// The test run builds beside a running application, so its output folder is its own.
/** In development the page framework is the server: jobs, announcements and live streams join it. */
const developmentServices = {
  name: 'development-services',
  hooks: {
    'astro:server:setup': async ({ server }) => {
      const load = () => server.ssrLoadModule('/src/server/development.ts');
      server.middlewares.use((req, res, next) => {
        load()
          .then((m) => m.developmentMiddleware(req, res, next))
          .catch(next);
      });
    },
  },
};

const outDir = process.env.FAIRLEAD_OUT_DIR ?? './dist';

export default defineConfig({
  output: 'server',
  outDir,
  trailingSlash: 'never',
  adapter: node({ mode: 'middleware' }),
  integrations: [react(), developmentServices],
  // The Origin check is the endpoint's own, on every unsafe method and content type.
  security: { checkOrigin: false },
  build: {
    // No inline styles and no small inline scripts: the content security policy names hashes.
    inlineStylesheets: 'never',
    assets: '_assets',
  },
  devToolbar: { enabled: false },
  image: { service: { entrypoint: 'astro/assets/services/noop' } },
  vite: {
    plugins: [tailwindcss()],
    build: { assetsInlineLimit: 0 },
    cacheDir: process.env.FAIRLEAD_VITE_CACHE ?? 'node_modules/.vite',
  },
});
