import { findDesign } from '@/db/queries/designs'
import { findVersion } from '@/db/queries/versions'
import { noBody, teamRoute } from '@/lib/actions/route'
import { exportFile, exportOptionsFrom, usualStructure } from '@/lib/exports'
import { versionParamsSchema } from '@/lib/exports/params'

/** A version's coefficients as a file, made from the numbers that were kept with it. The same question gets the same bytes. */
export const GET = teamRoute('version.export', {
  params: versionParamsSchema,
  body: noBody,
  what: 'version',
  find: async (access, { designId, number }, tx) => {
    const design = await findDesign(access, designId, tx)
    const version = await findVersion(access, designId, number, tx)
    return design && version ? { design, version } : null
  },
  run: async ({ request, found: { design, version }, trail }) => {
    const options = exportOptionsFrom(new URL(request.url).searchParams, usualStructure(version.coefficients))
    const file = exportFile({ design, version, kept: version.coefficients }, options)
    // Whose firmware holds which numbers is what a trail is asked years later.
    const { number, checksum } = version
    await trail({
      team: design.teamId,
      object: `design:${design.id}`,
      details: { number, checksum, format: options.format },
    })
    return new Response(file.text, {
      headers: {
        'content-type': file.mediaType,
        // The name is an identifier, so that it needs no quoting rules.
        'content-disposition': `attachment; filename="${file.fileName}"`,
      },
    })
  },
})
