import { quasar, transformAssetUrls } from '@quasar/vite-plugin'
import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vite'

const server = `http://127.0.0.1:${process.env.PORT ?? '8470'}`

export default defineConfig({
  plugins: [
    vue({ template: { transformAssetUrls } }),
    quasar({ sassVariables: new URL('src/css/quasar-variables.scss', import.meta.url).pathname }),
  ],
  build: {
    outDir: 'dist/client',
    emptyOutDir: true,
    target: 'es2022',
    // The content security policy lets no data: fonts and no inline scripts through.
    assetsInlineLimit: 0,
    modulePreload: { polyfill: false },
    sourcemap: false,
  },
  server: {
    host: '127.0.0.1',
    proxy: {
      '/api': { target: server, changeOrigin: true, headers: { Origin: server } },
      '/live': { target: server, changeOrigin: true, ws: true, headers: { Origin: server } },
    },
  },
})
