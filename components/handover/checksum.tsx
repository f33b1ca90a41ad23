'use client'

import { useEffect, useState } from 'react'
import { canonicalText, type StoredCoefficients } from '@/lib/designs/stored-coefficients'

type Agreement = 'unknown' | 'agrees' | 'differs'

/** The version's checksum, and whether the numbers that reached this browser have it. */
export function Checksum({ checksum, numbers }: { checksum: string; numbers: StoredCoefficients }) {
  const agreement = useAgreement(checksum, numbers)
  return (
    <div className="text-[13px]">
      <p className="text-pencil">SHA-256 of the coefficients</p>
      <p className="numeric wrap-anywhere text-[12px] leading-5 text-ink">{checksum}</p>
      {agreement === 'agrees' ? (
        <p className="text-moss">Computed again in this browser: the numbers shown have this checksum</p>
      ) : null}
      {agreement === 'differs' ? (
        <p className="text-vermilion">
          The numbers shown here do not have this checksum. Don’t use this file; tell the owner of the team.
        </p>
      ) : null}
    </div>
  )
}

function useAgreement(checksum: string, numbers: StoredCoefficients): Agreement {
  const [found, setFound] = useState<{ readonly of: StoredCoefficients; readonly hex: string } | null>(null)
  useEffect(() => {
    // Browsers digest on secure pages only; elsewhere nothing is claimed.
    if (!globalThis.isSecureContext) return undefined
    let isCurrent = true
    void digestHex(canonicalText(numbers)).then((hex) => {
      if (isCurrent) setFound({ of: numbers, hex })
    })
    return () => {
      isCurrent = false
    }
  }, [numbers])
  if (found === null || found.of !== numbers) return 'unknown'
  return found.hex === checksum ? 'agrees' : 'differs'
}

async function digestHex(text: string): Promise<string> {
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(text))
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, '0')).join('')
}
