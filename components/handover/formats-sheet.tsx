import type { ReactNode } from 'react'
import { caution } from '@/lib/caution'
import { ratioLimitDb } from '@/lib/exports/coefficient-set'
import { typesetEquation } from '@/lib/exports/equation'
import { coefficientSetFields } from '@/lib/exports/json-fields'
import { judgedRangeDb } from '@/lib/exports/rounding'
import { testVectorWords } from '@/lib/exports/test-vector'
import { FieldsTable } from './fields-table'

/** What a coefficient file says and how firmware proves its port with it. */
export function FormatsSheet({ schemaHref, children }: { schemaHref: string; children?: ReactNode }) {
  return (
    <main className="mx-auto flex w-full max-w-4xl flex-col gap-8 px-4 py-8 sm:px-6">
      <div>
        <h1 className="text-[26px]">Coefficient files</h1>
        <p className="mt-2 max-w-[68ch]">
          A version is handed over as a file that states everything a port needs: the sampling rate, the held frequency,
          the structure, the difference equation with its signs, the version and its checksum, the state to start
          settled from, and a test vector. The same version and the same choices give the same bytes.
        </p>
      </div>

      <Part id="signs" title="Signs">
        <p>
          Ask for the sign your code uses. Each file prints its equation; the coefficient of y[n] is 1 and is never
          listed. An FIR filter has no feedback and no sign to choose.
        </p>
        <dl className="mt-2 grid gap-x-4 gap-y-1 sm:grid-cols-[max-content_minmax(0,1fr)]">
          <dt className="text-pencil">Subtracted</dt>
          <dd className="numeric text-[13px] leading-6">{typesetEquation('sections', 'subtract', 2)}</dd>
          <dt className="text-pencil">Added</dt>
          <dd className="numeric text-[13px] leading-6">{typesetEquation('sections', 'add', 2)}</dd>
          <dt className="text-pencil">No feedback</dt>
          <dd className="numeric text-[13px] leading-6">{typesetEquation('taps', 'subtract', 62)}</dd>
        </dl>
      </Part>

      <Part id="structures" title="Structures and numbers">
        <p>
          Sections are a cascade of second-order sections: the output of each is the input of the next. b/a is one
          numerator and one denominator. It is refused where its coefficients, rounded to the number type, move the
          response by more than {ratioLimitDb} dB or make it unstable. How far the chosen rounding moves the response,
          down to {judgedRangeDb} dB below its peak, stands in the file.
        </p>
        <p className="mt-2">
          An FIR filter is handed over as its taps, and as nothing else; a filter with feedback never is. The held
          frequency of a filter is stated where there is one: an FIR filter, a fitted version and a transform that was
          not held say so in its place.
        </p>
        <p className="mt-2">
          Doubles are written in the fewest decimal digits that read back to the same bits, singles in the fewest that
          name the same single; a C header can have hexadecimal constants instead.
        </p>
      </Part>

      <Part id="proof" title="Proving a port">
        <p>
          The test vector is {testVectorWords()}. For an FIR filter of many taps it goes on until every tap has met the
          noise. Its output is that of direct form II transposed, each operation rounded to the number type, in this
          order for every section, with subtracted feedback:
        </p>
        <pre className="numeric mt-2 overflow-x-auto border border-graph-strong bg-sheet p-3 text-[13px]" tabIndex={0}>
          {'y  = b0*x + s1\ns1 = b1*x + s2 - a1*y\ns2 = b2*x - a2*y'}
        </pre>
        <p className="mt-2">
          and of taps the sum of their products, added one by one from the oldest sample’s to the newest’s. A port that
          adds the samples of equal taps first saves multiplications and differs in the last bits.
        </p>
        <p className="mt-2">
          Arithmetic that fuses a multiplication with an addition, keeps wider intermediates or flushes tiny numbers to
          zero differs in the last bits. The C header holds this very code, and behind a macro a function that returns
          the largest difference from the stated output.
        </p>
      </Part>

      <Part id="checksum" title="Checksum">
        <p>
          SHA-256 of the numbers kept with the version, in double precision: the same in all its files, whatever type,
          structure and sign they have. The JSON file carries those numbers as <code className="text-[13px]">kept</code>
          ; written without spaces, as ECMAScript&rsquo;s JSON.stringify writes them, they give the checksum.
        </p>
      </Part>

      <Part id="csv" title="CSV, C, NumPy and Octave">
        <p>
          CSV is one table of four columns: part, index, name, value; text that a spreadsheet would take for a formula
          is marked with an apostrophe, numbers never are. The C header is C99 with static data and inline functions, a
          state that the caller owns, and nothing else. NumPy and Octave files assign array literals: a row for each
          section, b0, b1, b2, a1, a2, or one of the taps.
        </p>
      </Part>

      <Part id="json" title="JSON">
        <p>
          Its schema is served as{' '}
          <a href={schemaHref} className="text-spruce underline underline-offset-2">
            JSON Schema
          </a>
          ; every key is always there, and no other.
        </p>
        <FieldsTable label="Fields of the JSON file" fields={coefficientSetFields()} />
      </Part>

      {children}

      <p className="border-t border-graph pt-4 text-[13px] text-pencil">{caution}</p>
    </main>
  )
}

export function Part({ id, title, children }: { id: string; title: string; children: ReactNode }) {
  return (
    <section aria-labelledby={id} className="min-w-0">
      <h2 id={id} className="mb-1 text-[19px]">
        {title}
      </h2>
      <div className="min-w-0 text-[15px]">{children}</div>
    </section>
  )
}
