import { resolve } from 'node:path'
import type { TestProject } from 'vitest/node'
import { preview } from 'vite'
import { findChromium } from './find-chromium.ts'

declare module 'vitest' {
  interface ProvidedContext {
    address: string
    chromium: string
  }
}

/** Serves the production build (made by `npm test` before) for all browser tests. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const chromium = findChromium()
  const server = await preview({
    root: resolve(import.meta.dirname, '..'),
    configFile: resolve(import.meta.dirname, '../vite.config.ts'),
    preview: { host: '127.0.0.1', port: 4290 },
    logLevel: 'error',
  })
  const address = server.resolvedUrls?.local[0]
  if (address === undefined) throw new Error('the preview server gave no address')
  project.provide('address', address)
  project.provide('chromium', chromium)
  return () => server.close()
}
