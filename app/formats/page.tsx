import type { Metadata } from 'next'
import Link from 'next/link'
import { Header } from '@/components/frame/header'
import { ChainFormatPart } from '@/components/handover/chain-format-part'
import { FormatsSheet } from '@/components/handover/formats-sheet'
import { buttonClass } from '@/components/ui/button'

export const metadata: Metadata = { title: 'Coefficient files' }

/** What the files of a hand-over hold; open to all, since who ports a filter need not have an account. */
export default function FormatsPage() {
  return (
    <>
      <Header crumbs={[{ label: 'Coefficient files' }]}>
        <Link href="/projects" className={buttonClass()}>
          Projects
        </Link>
      </Header>
      <FormatsSheet schemaHref="/api/formats/coefficient-set">
        <ChainFormatPart schemaHref="/api/formats/chain" />
      </FormatsSheet>
    </>
  )
}
