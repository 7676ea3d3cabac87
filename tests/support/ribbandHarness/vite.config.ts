import vue from '@vitejs/plugin-vue'
import tailwindcss from 'tailwindcss'
import { defineConfig } from 'vite'
import tailwind from '../../../tailwind.config'

const root = new URL('.', import.meta.url).pathname
const product = new URL('../../../', import.meta.url).pathname

export default defineConfig({
  root,
  plugins: [vue()],
  css: { postcss: { plugins: [tailwindcss({ ...tailwind, content: [`${product}app/**/*.{vue,ts}`, `${root}*.vue`] })] } },
  server: { fs: { allow: [product] } },
  optimizeDeps: { include: ['vue', '@vueuse/core'] },
  cacheDir: '/tmp/ribband-harness-vite',
  logLevel: 'warn',
})
