import 'server-only'
import type { Caller } from './accounts'
import { clientAddress } from './client-address'

export function callerOf(headers: Pick<Headers, 'get'>): Caller {
  return { address: clientAddress(headers), agent: (headers.get('user-agent') ?? '').slice(0, 200) }
}
