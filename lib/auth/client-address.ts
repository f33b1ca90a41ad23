import 'server-only'

/**
 * The network address that a request came from, for counting only.
 *
 * Next puts the socket's address into X-Forwarded-For when the request brings none; a reverse proxy appends the address it saw. The last
 * entry is therefore the one that nearest to us vouches for; the entries before it are whatever the client wrote. A client that reaches the
 * app without a proxy can write that header itself, which is why sign-in is also counted by account.
 */
export function clientAddress(headers: Pick<Headers, 'get'>): string {
  const last = headers.get('x-forwarded-for')?.split(',').at(-1)?.trim()
  if (last === undefined || last === '') return 'unknown'
  return network(last)
}

/** One household or host usually has a whole /64 of IPv6, so that a single address of it is no identity. */
function network(address: string): string {
  const plain = address.replace(/^::ffff:(?=\d+\.)/i, '')
  if (!plain.includes(':')) return plain
  const [head = '', tail] = plain.split('::')
  const groups = head.split(':').filter(Boolean)
  if (tail !== undefined) {
    const after = tail.split(':').filter(Boolean)
    while (groups.length + after.length < 8) groups.push('0')
    groups.push(...after)
  }
  return `${groups.slice(0, 4).join(':')}::/64`
}
