import { mkdtempSync, readFileSync, readdirSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createTransport, type SendMailOptions } from 'nodemailer'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createMailStore, startMailbox } from '../../lib/launch/mailbox.mjs'
import { decodeWords, readMail } from '../../lib/launch/mime.mjs'

const folder = mkdtempSync(join(tmpdir(), 'polewright-mailbox-'))
let mailbox: Awaited<ReturnType<typeof startMailbox>>
beforeAll(async () => {
  mailbox = await startMailbox({ folder })
})
afterAll(async () => {
  await mailbox.close()
  rmSync(folder, { recursive: true, force: true })
})

/** Sends a message over SMTP and reads the file that came of it. */
async function send(message: SendMailOptions): Promise<Record<string, unknown>> {
  const before = new Set(readdirSync(folder))
  const transport = createTransport(`smtp://127.0.0.1:${mailbox.port}`)
  await transport.sendMail({ from: 'Polewright <no-reply@polewright.example>', to: 'lead@example.org', ...message })
  transport.close()
  const added = readdirSync(folder).filter((name) => !before.has(name))
  expect(added).toHaveLength(1)
  const path = join(folder, added[0] ?? '')
  expect(statSync(path).mode & 0o777).toBe(0o600)
  const kept: unknown = JSON.parse(readFileSync(path, 'utf8'))
  return Object(kept)
}

describe('the local mailbox', () => {
  it('keeps text and HTML, with letters of all kinds and lines of any length', async () => {
    const text = `Öffnen: https://polewright.example/reset#token=${'x'.repeat(200)}\n\nMit Grüßen – 濾波器 = 50 %\n.\n`
    const html = '<p>Öffnen <a href="https://polewright.example/?a=1&amp;b=2">hier</a></p>'
    const kept = await send({
      subject: 'Neues Passwort für „Fußgängerbrücke“ und noch ein langer Rest der Zeile',
      text,
      html,
    })
    expect(kept).toMatchObject({
      from: 'Polewright <no-reply@polewright.example>',
      to: ['lead@example.org'],
      subject: 'Neues Passwort für „Fußgängerbrücke“ und noch ein langer Rest der Zeile',
      html,
    })
    expect(String(kept.text).replaceAll('\r\n', '\n').trimEnd()).toBe(text.trimEnd())
    expect(Date.parse(String(kept.receivedAt))).toBeGreaterThan(Date.now() - 60_000)
  })

  it('keeps every recipient, also those that the headers hide, and passes attachments over', async () => {
    const kept = await send({
      bcc: 'hidden@example.net',
      subject: 'Sheet',
      text: 'See the sheet.',
      attachments: [{ filename: 'sheet.txt', content: 'not the text' }],
    })
    expect(kept.to).toEqual(['lead@example.org', 'hidden@example.net'])
    expect(String(kept.text).trim()).toBe('See the sheet.')
    expect(kept.html).toBe('')
  })

  it('refuses what is larger than a mail should be', async () => {
    await expect(send({ subject: 'Large', text: 'x'.repeat(6 * 1024 * 1024) })).rejects.toThrow(/size|bytes/i)
  })

  it('lets the oldest go', () => {
    const own = join(folder, 'many')
    const keep = createMailStore(own)
    for (let i = 0; i < 503; i++) keep({ i })
    const names = readdirSync(own).sort()
    expect(names).toHaveLength(500)
    expect(JSON.parse(readFileSync(join(own, names[0] ?? ''), 'utf8'))).toEqual({ i: 3 })
    rmSync(own, { recursive: true })
  })
})

describe('reading a message', () => {
  it('decodes words by RFC 2047', () => {
    expect(decodeWords('=?ISO-8859-1?Q?Patrik_F=E4ltstr=F6m?= <x@example.org>')).toBe(
      'Patrik Fältström <x@example.org>',
    )
    // RFC 2047, section 8: blanks between two encoded words are no part of the text.
    expect(decodeWords('(=?ISO-8859-1?Q?a?= =?ISO-8859-1?Q?b?=)')).toBe('(ab)')
    expect(decodeWords('(=?ISO-8859-1?Q?a?= b)')).toBe('(a b)')
    expect(decodeWords('=?utf-8?B?4oiSMyBkQg==?=')).toBe('−3 dB')
  })

  it('takes broken messages as they are', () => {
    expect(readMail(Buffer.from('')).text).toBe('')
    expect(readMail(Buffer.from('no headers at all')).text).toBe('')
    expect(readMail(Buffer.from('\r\nonly a body')).text).toBe('only a body')
    expect(
      readMail(Buffer.from('Subject: x\r\nContent-Type: multipart/mixed; boundary=q\r\n\r\n--q\r\n\r\npart')).text,
    ).toBe('part')
    expect(readMail(Buffer.from('Content-Type: text/plain; charset=martian\r\n\r\nhello')).text).toBe('hello')
  })
})
