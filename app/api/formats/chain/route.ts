import { chainJsonSchema } from '@/lib/exports/chain-json'

/** The schema of the JSON file of a chain (JSON Schema, draft 2020-12): the same that writes and checks the files. */
export function GET(): Response {
  return new Response(`${JSON.stringify(chainJsonSchema(), null, 2)}\n`, {
    headers: {
      'content-type': 'application/schema+json; charset=utf-8',
      'cache-control': 'public, max-age=300',
      'x-content-type-options': 'nosniff',
    },
  })
}
