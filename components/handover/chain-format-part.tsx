import { chainFields } from '@/lib/exports/json-fields'
import { FieldsTable } from './fields-table'
import { Part } from './formats-sheet'

/** What the files of a chain hold. */
export function ChainFormatPart({ schemaHref }: { schemaHref: string }) {
  return (
    <Part id="chains" title="Measurement chains">
      <p>
        A version of a chain is handed over as JSON: the chain as it was stated, the figures it was saved with, the
        numbers of every digital stage in signal order (decimation, integration, and shaping by a design), a test
        vector, and the checksum. A stage that is tied to a design holds the version it is tied to and that version’s
        spec. Its schema is served as{' '}
        <a href={schemaHref} className="text-spruce underline underline-offset-2">
          JSON Schema
        </a>
        .
      </p>
      <p className="mt-2">
        The C header of a chain holds the same numbers in order of use, in double precision, with the equation that each
        stage computes in a comment: of a decimation its taps or sections, its factor, its rates and its delay, and for
        a CIC filter its order, its comb delay, its gain and the bits that it adds; of an integration the sections of
        its high-pass, how often it integrates by the trapezoidal rule, and the scale from the unit ahead to the unit
        behind; of a shaping design its sections or taps, with its drawing and version. Feedback is subtracted. It runs
        nothing by itself. Only the samples that are kept need computing where there is no feedback.
      </p>
      <p className="mt-2">
        The test vector is for all digital stages together: volts that the converter reads, at its rate, and the samples
        that must then be stored. Started from rest, a run in double precision keeps to them within the tolerance that
        stands beside them. A version that was saved before stages that integrate and shape were kept holds the
        decimations alone (numbers of format 1), and a test vector only where it has no other digital stages; its page
        and its files say so.
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
