import { chainFields } from '@/lib/exports/json-fields'
import { FieldsTable } from './fields-table'
import { Part } from './formats-sheet'

/** What the files of a chain hold. */
export function ChainFormatPart({ schemaHref }: { schemaHref: string }) {
  return (
    <Part id="chains" title="Measurement chains">
      <p>
        A version of a chain is handed over as JSON: the chain as it was stated, the figures it was saved with, what its
        decimation stages run, and their checksum. A stage that is tied to a design holds the version it is tied to and
        that version’s spec. Its schema is served as{' '}
        <a href={schemaHref} className="text-spruce underline underline-offset-2">
          JSON Schema
        </a>
        .
      </p>
      <p className="mt-2">
        The C header of a chain holds the taps of every decimation stage in order of use, with its factor, its rates and
        its delay, and for a CIC filter its order, its delay, its gain and the bits that it adds; in double precision,
        and nothing that runs. Only the samples that are kept need computing. Stages that shape are designs, handed over
        by themselves.
      </p>
      <p className="mt-2">
        The checksum is the SHA-256 of <code className="text-[13px]">spec</code>,{' '}
        <code className="text-[13px]">figures</code> and <code className="text-[13px]">numbers</code> as one object,
        written with its keys in order, without spaces, and with numbers as ECMAScript writes them (RFC 8785).
      </p>
      <FieldsTable label="Fields of a chain’s JSON file" fields={chainFields()} />
    </Part>
  )
}
