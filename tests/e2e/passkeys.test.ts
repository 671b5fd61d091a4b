import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { passkeyOrigin } from '../support/authenticator'
import { newPage, phone, useBrowser } from '../support/browser'
import { sql } from '../support/database'
import { newStudio } from '../support/studio'

useBrowser()

/** An authenticator with finger and memory, as a phone has one; the browser's own protocol makes it. */
async function addAuthenticator(page: Page) {
  const session = await page.context().newCDPSession(page)
  await session.send('WebAuthn.enable')
  await session.send('WebAuthn.addVirtualAuthenticator', { options: { protocol: 'ctap2', transport: 'internal', hasResidentKey: true, hasUserVerification: true, isUserVerified: true, automaticPresenceSimulation: true } })
}

describe('a passkey on a phone', () => {
  it('is added in the account, signs in without a password, and proves who one is', async () => {
    const { agent, studio, ids, email, password } = await newStudio()
    const origin = await passkeyOrigin(agent)
    const { page, errors } = await newPage({ size: phone })
    await addAuthenticator(page)
    await page.goto(`${origin}/?next=/account`)
    await page.getByLabel('E-mail').fill(email)
    await page.getByLabel('Password').fill(password)
    await page.getByRole('button', { name: 'Sign in', exact: true }).click()
    await page.getByLabel('Which device it is for').fill('Phone by the sink')
    await page.getByRole('button', { name: 'Add', exact: true }).click()
    await page.getByText('The passkey is kept.').waitFor()

    await page.getByRole('button', { name: 'Sign out everywhere' }).click()
    await page.getByRole('button', { name: 'Sign in with a passkey' }).click()
    await page.waitForURL(`${origin}/s/${studio.slug}`)

    await sql('update users set password_hash = null where id = $1', [ids.user])
    await sql('update sessions set fresh_at = now() - interval \'11 minutes\' where user_id = $1', [ids.user])
    await page.goto(`${origin}/account`)
    await page.getByRole('button', { name: 'Remove Phone by the sink' }).click()
    await page.getByRole('button', { name: 'Remove it' }).click()
    await page.getByRole('button', { name: 'Use a passkey' }).click()
    await page.getByText('This is your only way of signing in.').waitFor()
    expect(errors).toEqual([])
  })

  it('is not offered where it can’t work, and the account says where it does', async () => {
    const { agent } = await newStudio()
    const { page } = await newPage({ size: phone, agent })
    await page.goto('/account')
    await page.getByText('Passkeys belong to one address.').waitFor()
    expect(await page.getByLabel('Which device it is for').count()).toBe(0)
  })
})
