import 'server-only'
import { notFound } from 'next/navigation'
import { findDesign } from '@/db/queries/designs'
import { requireFound } from '@/lib/auth/page-access'
import { designParamsSchema } from './schemas'

/** What every page of one design starts with. An id that can't be one is the id of nothing. */
export async function requireDesign(params: Promise<unknown>, pathOf: (designId: string) => string) {
  const parsed = designParamsSchema.safeParse(await params)
  if (!parsed.success) notFound()
  const { designId } = parsed.data
  return requireFound('design.read', pathOf(designId), (access) => findDesign(access, designId))
}
