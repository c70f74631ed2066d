/** Builds the page into dist/page. Paths in it are relative, so that it also works under `serve --base`. */
export default {
  root: decodeURIComponent(new URL('.', import.meta.url).pathname),
  base: './',
  build: {
    outDir: '../dist/page',
    emptyOutDir: true,
    target: 'es2022',
    // The polyfill would be one more script; every browser that has WebGL 2 preloads modules itself.
    modulePreload: { polyfill: false },
    // Inlined files become data: addresses, which the strict content policy of the service refuses.
    assetsInlineLimit: 0,
    chunkSizeWarningLimit: 900,
  },
};
