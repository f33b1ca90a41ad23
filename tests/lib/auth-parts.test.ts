import { describe, expect, it } from 'vitest'
import { agentWords } from '@/lib/auth/agent-words'
import { clientAddress } from '@/lib/auth/client-address'
import { commonPasswords } from '@/lib/auth/common-passwords'
import { hashPassword, verifyPassword } from '@/lib/auth/passwords'
import { resetMail } from '@/lib/mail/templates'

const from = (value: string | null) => clientAddress({ get: () => value })

describe('the address a request is counted by', () => {
  it.each([
    ['the socket’s, when nobody wrote the header before Next did', '192.0.2.5', '192.0.2.5'],
    ['the one the nearest proxy saw, not what the client wrote', '10.0.0.1, 203.0.113.9', '203.0.113.9'],
    ['IPv4 in IPv6 clothing', '::ffff:192.0.2.5', '192.0.2.5'],
    ['a network of IPv6, since one host has a whole /64', '2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['a shortened IPv6 address', '2001:db8::1', '2001:db8:0:0::/64'],
    ['loopback', '::1', '0:0:0:0::/64'],
    ['nothing', null, 'unknown'],
    ['an empty header', '', 'unknown'],
  ])('is %s', (_, header, expected) => {
    expect(from(header)).toBe(expected)
  })
})

describe('passwords', () => {
  it('are the same however the keyboard composes an accent', async () => {
    const hash = await hashPassword('caf\u00e9-harbour')
    expect(await verifyPassword(hash, 'cafe\u0301-harbour')).toBe(true)
    expect(await verifyPassword(hash, 'cafe-harbour')).toBe(false)
  })

  it('are salted', async () => {
    expect(await hashPassword('velvet harbour')).not.toBe(await hashPassword('velvet harbour'))
  })

  it('count to the last byte: nothing is cut off', async () => {
    const long = 'x3-'.repeat(80)
    const hash = await hashPassword(`${long}a`)
    expect(await verifyPassword(hash, `${long}b`)).toBe(false)
    expect(await verifyPassword(hash, `${long}a`)).toBe(true)
  })

  it('never match where there is no account, not even the words of the stand-in', async () => {
    expect(await verifyPassword(null, 'no account has this hash')).toBe(false)
  })

  it('come with a list of several hundred common ones, in lower case', () => {
    expect(commonPasswords.size).toBeGreaterThan(500)
    for (const one of commonPasswords) expect(one).toBe(one.toLowerCase())
  })
})

describe('a browser’s name for itself', () => {
  it.each([
    [
      'Mozilla/5.0 (X11; Linux x86_64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/156.0.0.0 Safari/537.36',
      'Chrome on Linux',
    ],
    ['Mozilla/5.0 (Windows NT 10.0; Win64; x64; rv:150.0) Gecko/20100101 Firefox/150.0', 'Firefox on Windows'],
    [
      'Mozilla/5.0 (iPhone; CPU iPhone OS 19_0 like Mac OS X) AppleWebKit/605.1.15 Version/19.0 Mobile/15E148 Safari/604.1',
      'Safari on iOS',
    ],
    ['', 'Unknown browser'],
    ['<script>', 'Unknown browser'],
  ])('%s', (agent, words) => {
    expect(agentWords(agent)).toBe(words)
  })
})

describe('the mail with a link', () => {
  const mail = resetMail('someone@company.example', 'https://polewright.example', 'a-token', 30)

  it('says the same in both its forms, with the token behind #', () => {
    expect(mail.text).toContain('https://polewright.example/reset#a-token')
    expect(mail.html).toContain('href="https://polewright.example/reset#a-token"')
    expect(mail.text).toContain('30 minutes')
    expect(mail.html).toContain('30 minutes')
  })

  it('loads nothing from elsewhere', () => {
    expect(mail.html).not.toMatch(/<img|<script|src=|url\(/)
  })
})
