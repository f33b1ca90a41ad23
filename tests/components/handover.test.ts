import { createElement } from 'react'
import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import type { DesignSpec } from '@/dsp'
import { equationOf, previewOf, ratioProblem } from '@/components/handover/draft-file'
import { FormatsSheet } from '@/components/handover/formats-sheet'
import { HandOver } from '@/components/handover/hand-over'
import { VersionSheet } from '@/components/handover/version-sheet'
import { History } from '@/components/studio/panels/history'
import { coefficientsOf } from '@/lib/designs/coefficients'
import { designFromSpec, isFir } from '@/dsp'
import type { DesignRecord, VersionSummary } from '@/lib/designs/types'
import { exportFile, exportQuery, usualStructure, type ExportOptions } from '@/lib/exports'
import { coefficientSetFields } from '@/lib/exports/json-fields'
import { firDesign, firKinds, fittedLowPass, lowPass, ownKinds, ownMeasured, sourceOf } from '../helpers/export-sources'

const design: DesignRecord = {
  id: '7d4b6f3e-0000-4000-8000-000000000001',
  drawingNumber: 'HMF-LP-012',
  title: 'Deck accelerometer, logger low-pass',
  projectId: 'p',
  projectName: 'Harrow Mill footbridge',
}
const options: ExportOptions = {
  format: 'c',
  structure: 'sections',
  number: 'double',
  feedback: 'subtract',
  literals: 'decimal',
}
const versionOf = (spec: DesignSpec, change: Partial<VersionSummary> = {}): VersionSummary => ({
  ...sourceOf(spec).version,
  ...change,
})
const steep = lowPass({ order: 12, edgesHz: [12] })
const numbersOf = (spec: DesignSpec) => coefficientsOf(designFromSpec(spec))
const fir = firDesign()

describe('the preview', () => {
  it('is of the very file that is downloaded', () => {
    const version = versionOf(lowPass())
    const preview = previewOf(design, version, numbersOf(lowPass()), options)
    if (!('file' in preview)) throw new Error(preview.problem.message)
    expect(preview.file).toEqual(exportFile({ design, version, kept: numbersOf(lowPass()) }, options))
    expect(preview.file.text.startsWith(preview.firstLines)).toBe(true)
    expect(preview.firstLines.split('\n').length + preview.restLines).toBe(preview.file.text.split('\n').length)
  })

  it('stands back for the reason where there is no such file', () => {
    const version = versionOf(steep)
    const problem = (change: Partial<ExportOptions>) => {
      const preview = previewOf(design, version, numbersOf(steep), { ...options, ...change })
      return 'problem' in preview ? preview.problem : null
    }
    expect(problem({})).toBeNull()
    expect(problem({ structure: 'ratio' })).toMatchObject({ field: 'structure', nearest: 'sections' })
    expect(problem({ name: '3rd' })).toMatchObject({ field: 'name', nearest: 'filter_3rd' })
    expect(ratioProblem(numbersOf(steep), 'double')).toMatchObject({ field: 'structure' })
    expect(ratioProblem(numbersOf(lowPass()), 'double')).toBeNull()
  })

  it('is of the taps of an FIR filter, and of what an original of one’s own became', () => {
    for (const spec of [...firKinds, ...ownKinds, fittedLowPass]) {
      const [version, kept] = [versionOf(spec), numbersOf(spec)]
      const chosen = { ...options, structure: usualStructure(kept) }
      const preview = previewOf(design, version, kept, chosen)
      if (!('file' in preview)) throw new Error(preview.problem.message)
      expect(preview.file).toEqual(exportFile({ design, version, kept }, chosen))
      expect(preview.rounding).toContain('less than 1e-9 dB')
    }
    expect(previewOf(design, versionOf(fir), numbersOf(fir), options)).toMatchObject({
      problem: { field: 'structure', nearest: 'taps' },
    })
    expect(ratioProblem(numbersOf(fir), 'float')).toBeNull()
    expect(equationOf(numbersOf(fir), { ...options, structure: 'taps' }).typeset).toContain('… + h₄₀·x[n−40]')
  })

  it('shows the equation of the chosen structure and sign', () => {
    expect(equationOf(numbersOf(lowPass()), options).typeset).toContain('− a₂·y[n−2]')
    expect(equationOf(numbersOf(lowPass()), { ...options, structure: 'ratio', feedback: 'add' }).plain).toContain(
      '+ a4*y[n-4]',
    )
  })
})

describe('the panel', () => {
  const panel = (spec: DesignSpec, onClose?: () => void) =>
    renderToStaticMarkup(
      createElement(HandOver, {
        design,
        version: versionOf(spec),
        kept: numbersOf(spec),
        exportHref: (chosen) => `/x?${exportQuery(chosen)}`,
        onClose,
      }),
    )

  it('offers every choice by radio button, the file by link, and states checksum and caution', () => {
    const html = panel(lowPass())
    expect(html.match(/type="radio"/g)?.length).toBe(13)
    for (const word of [
      'JSON',
      'CSV',
      'C header',
      'NumPy',
      'Octave',
      'Sections',
      'b/a',
      'Double',
      'Single (float)',
      'Subtracted',
      'Added',
    ])
      expect(html).toContain(word)
    expect(html).toContain(
      'href="/x?format=c&amp;structure=sections&amp;number=double&amp;feedback=subtract&amp;literals=decimal"',
    )
    expect(html).toContain('download="hmf_lp_012_v3.h"')
    expect(html).toContain(versionOf(lowPass()).checksum)
    expect(html).toContain('licensed practitioner')
    expect(html).toContain('y[n] = b₀·x[n]')
  })

  it('offers of an FIR filter what there is: no other structure, no sign', () => {
    const html = panel(fir)
    expect(html.match(/type="radio"/g)?.length).toBe(9)
    expect(html).toContain('41 taps, the one structure of an FIR filter')
    expect(html).toContain('y[n] = h₀·x[n]')
    for (const word of ['Sections', 'b/a', 'Feedback terms', 'Subtracted', 'Added'])
      expect(html).not.toContain(`>${word}<`)
    expect(html).toContain('href="/x?format=c&amp;structure=taps&amp;number=double&amp;literals=decimal"')
    expect(html).toContain('download="hmf_lp_012_v3.h"')
    expect(html).toContain(versionOf(fir).checksum)
  })

  it('offers of a measured original all that its fit has', () => {
    const html = panel(ownMeasured)
    expect(html.match(/type="radio"/g)?.length).toBe(13)
    expect(html).toContain('fitted up to 300 Hz to a response given as measured')
  })

  it('says beside the structure that b/a is refused, before it is asked for', () => {
    expect(panel(steep)).toContain('As b/a in double precision')
    expect(panel(lowPass())).not.toContain('As b/a in double precision')
  })

  it('escapes what the user wrote', () => {
    const html = renderToStaticMarkup(
      createElement(HandOver, {
        design: { ...design, title: '</pre><script>alert(1)</script>' },
        version: versionOf(lowPass()),
        kept: numbersOf(lowPass()),
        exportHref: () => '/x',
      }),
    )
    expect(html).not.toContain('<script>')
  })

  it('closes where it was opened', () => {
    expect(panel(lowPass(), () => undefined)).toContain('Close')
    expect(panel(lowPass())).not.toContain('Close')
  })
})

describe('the sheet of a version', () => {
  const sheet = (mayExport: boolean) =>
    renderToStaticMarkup(
      createElement(VersionSheet, {
        design,
        version: versionOf(lowPass()),
        kept: numbersOf(lowPass()),
        numbers: [3, 2, 1],
        uses: [],
        mayExport,
      }),
    )

  it('shows every kept digit and the checksum', () => {
    const html = sheet(true)
    for (const section of coefficientsOf(designFromSpec(lowPass())).sections)
      for (const value of Object.values(section)) expect(html).toContain(String(value).replaceAll('-', '−'))
    expect(html).toContain('Hand over version 3')
    expect(html).toContain('01 Dec 2026 09:42 UTC')
  })

  it('shows every tap of an FIR filter, and speaks of no feedback terms', () => {
    const html = renderToStaticMarkup(
      createElement(VersionSheet, {
        design,
        version: versionOf(fir),
        kept: numbersOf(fir),
        numbers: [3],
        uses: [],
        mayExport: true,
      }),
    )
    const { digital } = designFromSpec(fir)
    if (!isFir(digital)) throw new Error('Taps were stated.')
    for (const tap of digital.taps) expect(html).toContain(`>${String(tap).replaceAll('-', '−')}<`)
    expect(html).toContain('41 taps in double precision, the same from either end; there is no feedback')
    expect(html).not.toContain('subtracted')
  })

  it('gives an observer the checksum and no file', () => {
    const html = sheet(false)
    expect(html).not.toContain('Download')
    expect(html).not.toContain('/export')
    expect(html).toContain(versionOf(lowPass()).checksum)
  })
})

describe('the page about the files', () => {
  const html = renderToStaticMarkup(createElement(FormatsSheet, { schemaHref: '/schema' }))

  it('lists every field of the file, nested ones and both structures', () => {
    for (const path of [
      'differenceEquation',
      'coefficients.sections[].b0',
      'coefficients.a',
      'coefficients.taps',
      'kept.taps',
      'kept.analog.poles[].re',
      'checksum.hex',
    ])
      expect(html).toContain(`>${path}<`)
    expect(html).toContain('href="/schema"')
  })

  it('names no field that a file lacks, and leaves out none that it has', () => {
    const listed = new Set(coefficientSetFields().map(({ path }) => path))
    const found = new Set<string>()
    const walk = (value: unknown, path: string): void => {
      if (Array.isArray(value)) value.forEach((item: unknown) => walk(item, `${path}[]`))
      else if (typeof value === 'object' && value !== null)
        for (const [key, inner] of Object.entries(value)) {
          const own = path === '' ? key : `${path}.${key}`
          found.add(own)
          walk(inner, own)
        }
    }
    for (const structure of ['sections', 'ratio'] as const) {
      const spec: DesignSpec = { ...lowPass(), how: { method: 'impulse-invariant' } }
      walk(JSON.parse(exportFile(sourceOf(spec), { ...options, format: 'json', structure }).text), '')
    }
    walk(JSON.parse(exportFile(sourceOf(fir), { ...options, format: 'json', structure: 'taps' }).text), '')
    // A low-pass sampled by its impulse response has no analog zeros to show.
    const never = ['kept.analog.zeros[].re', 'kept.analog.zeros[].im']
    expect([...found].filter((path) => !listed.has(path))).toEqual([])
    expect([...listed].filter((path) => !found.has(path) && !never.includes(path))).toEqual([])
  })
})

describe('the history', () => {
  const versions = [
    versionOf(lowPass({}, 600), { number: 3, parentNumber: 2, note: 'Slower logger' }),
    versionOf(lowPass(), { number: 2, parentNumber: 1, note: 'Budget only' }),
    versionOf(lowPass(), { number: 1, parentNumber: null, note: 'First' }),
  ]
  const history = (current: DesignSpec, change: { mayEdit?: boolean; versions?: readonly VersionSummary[] } = {}) =>
    renderToStaticMarkup(
      createElement(History, {
        versions,
        current,
        onRestore: () => undefined,
        compareHref: (sides) => `/compare?sides=${sides.join(',')}`,
        handOverHref: (number) => `/versions/${number}`,
        ...change,
      }),
    )

  it('lists versions with notes, times in UTC, changed words and ways on', () => {
    const html = history(lowPass({}, 300))
    expect(html.indexOf('Slower logger')).toBeLessThan(html.indexOf('First'))
    expect(html).toContain('01 Dec 2026 09:42 UTC')
    expect(html).toMatch(/<ins[^>]*>600\u2009Hz<\/ins>/)
    expect(html).toContain('Changed since version 2: sampling rate')
    expect(html).toContain('Same design as version 1')
    for (const href of ['/compare?sides=3,draft', '/compare?sides=2,3', '/versions/1'])
      expect(html).toContain(`href="${href}"`)
    expect(html.match(/Bring back into the draft/g)).toHaveLength(3)
  })

  it('says which version the draft equals instead of offering it back', () => {
    const html = history(lowPass({}, 600))
    expect(html.match(/The draft equals it/g)).toHaveLength(1)
    expect(html.match(/Bring back into the draft/g)).toHaveLength(2)
  })

  it('offers nothing to change to those who may not', () => {
    expect(history(lowPass({}, 300), { mayEdit: false })).not.toContain('Bring back')
  })

  it('says what to do while there is none', () => {
    expect(history(lowPass(), { versions: [] })).toContain('No version yet. Save one with a note')
  })
})
