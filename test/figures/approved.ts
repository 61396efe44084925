import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { resolve } from 'node:path'
import { expect } from 'vitest'

/** Numbers of attributes rounded to three decimals, as the painter writes them; texts are compared as they are. */
function rounded(svg: string): string {
  return svg.replace(/="[^"]*"/g, (attribute) =>
    attribute.replace(/-?\d+\.\d{4,}/g, (number) => String(Number(Number(number).toFixed(3)))),
  )
}

/**
 * Compares a figure with its approved picture in this folder. APPROVE=1 renews the picture; look at it before it is
 * committed.
 */
export function expectApproved(name: string, svg: string): void {
  const path = resolve(import.meta.dirname, `${name}.svg`)
  if (process.env['APPROVE'] === '1') writeFileSync(path, svg)
  if (!existsSync(path))
    throw new Error(`No approved picture ${name}.svg: make it with APPROVE=1 and look at it.`)
  expect(rounded(svg)).toBe(rounded(readFileSync(path, 'utf8')))
}
