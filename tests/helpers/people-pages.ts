import { expect } from 'vitest'
import type { Page } from 'playwright-core'

let people = 0

/** An account that nobody has yet. */
export function newAccount(name: string) {
  people += 1
  return { name, email: `${name.toLowerCase().replace(/\W+/g, '.')}.${process.pid}.${people}@example.org`, password: 'a long enough secret' }
}
export type Account = ReturnType<typeof newAccount>

/** Fills in the form of the register page, which is open, and sends it. */
export async function registerHere(page: Page, account: Account) {
  await page.getByLabel('Your name').fill(account.name)
  await page.getByLabel('E-mail').fill(account.email)
  await page.getByLabel('Password').fill(account.password)
  await page.getByRole('button', { name: 'Create the account' }).click()
}

export async function register(page: Page, account: Account) {
  await page.goto('/register')
  await registerHere(page, account)
  await page.waitForURL('**/scenarios')
}

/** Fills in the form of the sign-in page, which is open, and sends it. */
export async function signInHere(page: Page, account: Account) {
  await page.getByLabel('E-mail').fill(account.email)
  await page.getByLabel('Password').fill(account.password)
  await page.getByRole('button', { name: 'Sign in' }).click()
}

export async function signIn(page: Page, account: Account) {
  await page.goto('/sign-in')
  await signInHere(page, account)
}

export async function signOut(page: Page) {
  await page.locator('[data-test="account"]').click()
  await page.getByRole('button', { name: 'Sign out' }).click()
  await page.waitForURL('**/sign-in')
}

/** Opens the save dialog of the bench and gives the scenario its names. */
export async function nameScenario(page: Page, names: { title: string, machine?: string, axis?: string }) {
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel('Title').fill(names.title)
  if (names.machine !== undefined) await dialog.getByLabel('Machine').fill(names.machine)
  if (names.axis !== undefined) await dialog.getByLabel('Axis').fill(names.axis)
  return dialog
}

/** Saves the bench under a title and waits for the page of the scenario. Until that is there the dialog stays open, and what lies behind it out of reach. */
export async function saveAs(page: Page, title: string) {
  await (await nameScenario(page, { title })).getByRole('button', { name: 'Save', exact: true }).click()
  await page.waitForURL('**/scenarios/*')
  // The page of a scenario alone tells of saving.
  await saveState(page, /^saved$/)
}

export function saveState(page: Page, words: RegExp | string) {
  return expect.poll(() => page.locator('[data-test="save-state"]').innerText(), { timeout: 15_000 }).toMatch(words)
}

/** Makes a share link through the dialog and answers with its address. */
export async function shareLink(page: Page, permission: 'view' | 'comment'): Promise<string> {
  await page.getByRole('button', { name: 'Share', exact: true }).click()
  const dialog = page.getByRole('dialog')
  await dialog.getByLabel(permission === 'comment' ? /and comment/ : /look and try/).check()
  const links = dialog.locator('[data-test="share-link"]')
  await dialog.getByText(/Links that work/).waitFor()
  const before = await links.count()
  await dialog.getByRole('button', { name: 'Make a link' }).click()
  await expect.poll(() => links.count()).toBe(before + 1)
  const address = await links.first().getByLabel('Link', { exact: true }).inputValue()
  await page.keyboard.press('Escape')
  await dialog.waitFor({ state: 'hidden' })
  return address
}

export async function writeComment(page: Page, comment: { body: string, name?: string, about?: string }) {
  const form = page.getByRole('form', { name: 'New comment' })
  if (comment.about !== undefined) await form.locator('[data-test="anchor"]').selectOption({ label: comment.about })
  await form.getByLabel('Comment').fill(comment.body)
  if (comment.name !== undefined) await form.getByLabel('Your name').fill(comment.name)
  await form.getByRole('button', { name: 'Send the comment' }).click()
}

/** What a screen reader would be reading out: the name of the element with the focus. */
export const focused = (page: Page) => page.evaluate(() => {
  const element = document.activeElement as HTMLInputElement | null
  return element?.labels?.[0]?.textContent?.trim() ?? element?.textContent?.trim() ?? ''
})

export const commentsOf = (page: Page) => page.locator('[data-test="comment"]')
