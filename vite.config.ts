import { fileURLToPath } from 'node:url';
import vue from '@vitejs/plugin-vue';
import Components from 'unplugin-vue-components/vite';
import { AntDesignVueResolver } from 'unplugin-vue-components/resolvers';
import { defineConfig } from 'vitest/config';

const root = fileURLToPath(new URL('.', import.meta.url));
const ownAliases = [
  { find: /^@\//, replacement: `${root}src/` },
  { find: /^@shared\//, replacement: `${root}shared/` },
];

function clientPlugins() {
  return [
    vue(),
    Components({
      dirs: [],
      dts: 'src/components.d.ts',
      resolvers: [AntDesignVueResolver({ importStyle: false })],
    }),
  ];
}

export default defineConfig({
  plugins: clientPlugins(),
  resolve: { alias: ownAliases },
  build: {
    outDir: 'dist/client',
    emptyOutDir: true,
    // Fonts and pictures stay files: the content security policy allows no data: addresses for them.
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    rolldownOptions: {
      output: {
        codeSplitting: {
          groups: [
            {
              name: 'vue',
              test: /node_modules[\\/](@vue|vue|vue-router|pinia|@tanstack)[\\/]/,
              priority: 2,
            },
            {
              // One chunk, so that the parser is told not to make code from text before the first contract is made.
              name: 'parser',
              test: /node_modules[\\/]zod[\\/]|no-code-from-text/,
              priority: 3,
            },
            {
              name: 'component-base',
              test: /node_modules[\\/](ant-design-vue[\\/]es[\\/](_util|theme|style|config-provider|app|button)|@ant-design[\\/](colors|icons-svg)|@ctrl)[\\/]/,
              priority: 1,
            },
          ],
        },
      },
    },
  },
  optimizeDeps: {
    include: ['ant-design-vue/es', '@ant-design/icons-vue', 'wavesurfer.js', 'tus-js-client'],
  },
  test: {
    projects: [
      {
        resolve: { alias: ownAliases },
        test: {
          name: 'node',
          environment: 'node',
          pool: 'forks',
          // Loading the modules anew for each file took half the time. No file may leave anything behind in them.
          isolate: false,
          globalSetup: ['tests/support/kernel-setup.ts'],
          include: [
            'tests/shared/**/*.test.ts',
            'tests/server/**/*.test.ts',
            'tests/setup/**/*.test.ts',
            'tests/architecture.test.ts',
          ],
          testTimeout: 20_000,
          sequence: { groupOrder: 0 },
        },
      },
      {
        plugins: clientPlugins(),
        resolve: {
          alias: [
            ...ownAliases,
            // The bundled build of the component library: its thousands of ES files cost seconds per test file.
            { find: /^ant-design-vue\/es\//, replacement: 'ant-design-vue/lib/' },
            { find: /^ant-design-vue(\/es)?$/, replacement: 'ant-design-vue/lib/index.js' },
          ],
        },
        test: {
          name: 'client',
          environment: 'happy-dom',
          include: ['tests/src/**/*.test.ts'],
          setupFiles: ['tests/support/client-setup.ts'],
          testTimeout: 20_000,
          sequence: { groupOrder: 1 },
        },
      },
      {
        resolve: { alias: ownAliases },
        test: {
          name: 'browser',
          environment: 'node',
          pool: 'forks',
          include: ['tests/browser/**/*.spec.ts'],
          globalSetup: ['tests/support/browser/global-setup.ts'],
          testTimeout: 120_000,
          hookTimeout: 180_000,
          fileParallelism: false,
          retry: 0,
          sequence: { groupOrder: 2 },
        },
      },
    ],
  },
});
