import type { Metadata } from 'next'
import { Studio } from '@/components/studio/studio'
import { requireDesign } from '@/lib/designs/design-page'
import { openDesign } from '@/lib/designs/open-design'
import type { StudioActions } from '@/lib/designs/types'
import { renameDesign, saveVersion } from '../actions'

export async function generateMetadata({ params }: { params: Promise<unknown> }): Promise<Metadata> {
  const { found } = await requireDesign(params, (id) => `/designs/${id}`)
  return { title: found.title }
}

const actions: StudioActions = { saveVersion, renameDesign }

export default async function DesignPage({ params }: { params: Promise<unknown> }) {
  const { session, access, found } = await requireDesign(params, (id) => `/designs/${id}`)
  return <Studio {...await openDesign(session, access, found)} actions={actions} />
}
