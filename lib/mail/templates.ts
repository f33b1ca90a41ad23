import 'server-only'
import type { Mail } from './transport'

const escaped = (text: string) =>
  text.replace(
    /[&<>"']/g,
    (sign) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' })[sign] ?? sign,
  )

/** Plain paragraphs and at most one link, so that every mail program shows the same. */
function letter(
  to: string,
  subject: string,
  paragraphs: readonly string[],
  link?: { readonly words: string; readonly url: string },
): Mail {
  const text = [...paragraphs.slice(0, 1), ...(link ? [link.url] : []), ...paragraphs.slice(1), 'Polewright'].join(
    '\n\n',
  )
  const block = (inner: string) => `<p style="margin:0 0 16px">${inner}</p>`
  const body = [
    ...paragraphs.slice(0, 1).map((paragraph) => block(escaped(paragraph))),
    ...(link ? [block(`<a href="${escaped(link.url)}" style="color:#00695f">${escaped(link.words)}</a>`)] : []),
    ...paragraphs.slice(1).map((paragraph) => block(escaped(paragraph))),
    block('Polewright'),
  ].join('')
  const html = `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escaped(subject)}</title></head><body style="margin:24px;font:16px/1.5 sans-serif;color:#18222c;background:#fffefa">${body}</body></html>`
  return { to, subject, text: `${text}\n`, html }
}

/** The token stands behind #, a part of the address that browsers never send, so that it stays out of logs and Referer headers. */
export function resetMail(to: string, origin: string, token: string, validMinutes: number): Mail {
  return letter(
    to,
    'Set a new password for Polewright',
    [
      'Somebody, most likely you, asked to set a new password for your Polewright account. Follow this link to choose one:',
      `The link works once, for ${validMinutes} minutes. Your password stays as it is until you choose a new one; if you did not ask for this, you need not do anything.`,
    ],
    { words: 'Set a new password', url: `${origin}/reset#${token}` },
  )
}

/** So that a password that somebody else changed doesn't go unnoticed. */
export function passwordChangedMail(to: string, origin: string): Mail {
  return letter(
    to,
    'Your Polewright password was changed',
    [
      'The password of your Polewright account was changed just now, and every other session was ended.',
      'If that was not you, ask for a new link at once:',
    ],
    { words: 'Set a new password', url: `${origin}/forgot` },
  )
}
