import { fileURLToPath } from 'node:url'
import { defineConfig } from '@quasar/app-vite/wrappers'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))

export default defineConfig(() => ({
  boot: ['dress', 'server-state'],
  css: ['fonts.css', 'tokens.css', 'base.css', 'controls.css', 'dress.css', 'print.css'],
  extras: [],
  animations: [],
  // Components are imported where they are used; nothing is registered by name.
  framework: { config: {}, components: [], directives: [], plugins: [] },
  build: {
    target: { browser: ['es2022', 'chrome115', 'firefox115', 'safari16.4'], node: 'node20' },
    vueRouterMode: 'history',
    vueOptionsAPI: false,
    distDir: 'dist/spa',
    extendViteConf: () => ({
      resolve: {
        alias: [
          // Only the style sheets of the components in use, without the palette, grid and elevation classes.
          { find: 'quasar/dist/quasar.sass', replacement: here('./src/css/quasar-subset.sass') },
          { find: /^zod$/, replacement: here('./src/queries/zod-without-eval.ts') },
        ],
      },
      // The content security policy takes fonts from files alone, so nothing is inlined as data.
      build: { assetsInlineLimit: 0 },
    }),
  },
}))
