import { findChain } from '@/db/queries/chains'
import { findChainVersion } from '@/db/queries/chain-versions'
import { noBody, teamRoute } from '@/lib/actions/route'
import { chainVersionParamsSchema } from '@/lib/chains/schemas'
import { chainFile, chainFileOptionsFrom } from '@/lib/exports/chain-file'

/** A version of a chain as a file, made from what was kept with it. The same question gets the same bytes. */
export const GET = teamRoute('chain-version.export', {
  params: chainVersionParamsSchema,
  body: noBody,
  what: 'version',
  find: async (access, { chainId, number }, tx) => {
    const chain = await findChain(access, chainId, tx)
    const version = await findChainVersion(access, chainId, number, tx)
    return chain && version ? { chain, version } : null
  },
  run: async ({ request, found: { chain, version }, trail }) => {
    const options = chainFileOptionsFrom(new URL(request.url).searchParams)
    const file = chainFile({ chain, version }, options)
    // Whose firmware holds which numbers is what a trail is asked years later.
    const { number, checksum } = version
    await trail({ team: chain.teamId, object: `chain:${chain.id}`, details: { number, checksum, format: options.as } })
    return new Response(file.text, {
      headers: {
        'content-type': file.mediaType,
        // The name is an identifier, so that it needs no quoting rules.
        'content-disposition': `attachment; filename="${file.fileName}"`,
      },
    })
  },
})
