import react from '@vitejs/plugin-react'
import { defineConfig } from 'vitest/config'

export default defineConfig({
  plugins: [react()],
  base: './',
  worker: { format: 'es' },
  build: { target: 'es2023', chunkSizeWarningLimit: 900 },
  server: { host: '127.0.0.1' },
  preview: { host: '127.0.0.1', port: 4180 },
  test: { include: ['test/**/*.test.ts', 'test/**/*.test.tsx'], testTimeout: 60_000 },
})
