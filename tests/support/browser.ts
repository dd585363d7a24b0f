import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import process from 'node:process'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { baseUrl } from './team'

const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8')

export const SIZES = {
  desk: { width: 1440, height: 1000 },
  phone: { width: 390, height: 844 },
} as const

export function launch(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
    args: ['--headless', '--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
  })
}

export interface Watched {
  context: BrowserContext
  page: Page
  /** What went wrong on the pages so far: console errors and warnings (hydration among them), uncaught errors. */
  complaints: string[]
}

/** A browser window of one size that notes every complaint of the pages it shows. */
export async function openWindow(browser: Browser, size: keyof typeof SIZES, cookie = ''): Promise<Watched> {
  const context = await browser.newContext({ viewport: SIZES[size], baseURL: baseUrl(), hasTouch: size === 'phone' })
  if (cookie) {
    const [name, ...value] = cookie.split('=')
    await context.addCookies([{ name: name!, value: value.join('='), url: baseUrl() }])
  }
  const page = await context.newPage()
  const complaints: string[] = []
  page.on('console', (message) => {
    if (['error', 'warning'].includes(message.type())) complaints.push(`${page.url()}: ${message.text()}`)
  })
  page.on('pageerror', error => complaints.push(`${page.url()}: ${String(error)}`))
  return { context, page, complaints }
}

/** Faults that axe finds against WCAG 2.2 A and AA, one line each. */
export async function axe(page: Page): Promise<string[]> {
  // As a function of the page's own, since its content security policy allows no foreign script.
  await page.evaluate(axeSource)
  return page.evaluate(async () => {
    interface Violation { id: string, help: string, nodes: { target: unknown[], failureSummary?: string }[] }
    interface Axe { run: (context: Document, options: object) => Promise<{ violations: Violation[] }> }
    const { axe } = window as unknown as { axe: Axe }
    const { violations } = await axe.run(document, { runOnly: { type: 'tag', values: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] } })
    return violations.flatMap(({ id, help, nodes }) => nodes.map(node => `${id}: ${help}: ${node.target.join(' ')} ${node.failureSummary ?? ''}`))
  })
}

/** What a page of this width must not have: sideways scrolling, and touch targets under 44 px on a phone. */
export function layoutFaults(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const faults: string[] = []
    const width = document.documentElement.clientWidth
    if (document.documentElement.scrollWidth > width + 1) faults.push(`the page is ${document.documentElement.scrollWidth} px wide in ${width}`)
    if (!document.querySelector('h1')) faults.push('no h1')
    if (width > 640) return faults
    for (const element of document.querySelectorAll('a, button, input:not([type=hidden]), select, textarea, summary, [role=button]')) {
      const { width: w, height: h } = element.getBoundingClientRect()
      const label = element.closest('label')
      // Links within running text may be as small as the text (WCAG 2.2, 2.5.8, inline exception).
      const inText = element.closest('p, li, figcaption, svg')
      if (w > 1 && h < 43.5 && !inText && !(label && label.getBoundingClientRect().height >= 43.5)) {
        faults.push(`touch target ${Math.round(w)}x${Math.round(h)}: ${element.outerHTML.slice(0, 120)}`)
      }
    }
    return faults
  })
}
