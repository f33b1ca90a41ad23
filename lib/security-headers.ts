/*
 * What every page's answer carries. Kept apart from proxy.ts, so that tests can read the policy.
 */

/**
 * The content security policy. Scripts run by the nonce alone ('strict-dynamic' passes it on to the chunks they load). Style attributes
 * are allowed because positioned menus and plots set them; style elements need the nonce. Workers are our own files.
 */
export function contentSecurityPolicy(
  nonce: string,
  { isDevelopment, isSecure }: { isDevelopment: boolean; isSecure: boolean },
): string {
  const directives = [
    "default-src 'none'",
    // The development server's React rebuilds stack traces by eval.
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'${isDevelopment ? " 'unsafe-eval'" : ''}`,
    // The development server injects style elements without a nonce.
    isDevelopment ? "style-src 'self' 'unsafe-inline'" : `style-src 'self' 'nonce-${nonce}'`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' blob: data:",
    "font-src 'self'",
    `connect-src 'self'${isDevelopment ? ' ws:' : ''}`,
    "worker-src 'self' blob:",
    "media-src 'self' blob:",
    "manifest-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
    ...(isSecure ? ['upgrade-insecure-requests'] : []),
  ]
  return directives.join('; ')
}

export function pageHeaders({ isSecure }: { isSecure: boolean }): Readonly<Record<string, string>> {
  return {
    // Pages show what only their reader may see; neither proxies nor the back button after signing out shall keep them.
    'cache-control': 'private, no-store',
    'x-content-type-options': 'nosniff',
    'x-frame-options': 'DENY',
    // Not "no-referrer": with it, browsers send "Origin: null" from our own forms.
    'referrer-policy': 'same-origin',
    'cross-origin-opener-policy': 'same-origin',
    'cross-origin-resource-policy': 'same-origin',
    'permissions-policy': 'camera=(), geolocation=(), microphone=(), payment=(), usb=()',
    ...(isSecure && { 'strict-transport-security': 'max-age=31536000; includeSubDomains' }),
  }
}
