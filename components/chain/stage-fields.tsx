'use client'

import type { AnalogStage, ChainSpec, ConverterStage, DecimateStage, SensorStage, ShapeStage } from '@/dsp'
import { withDecimateType, withIntegrationTimes } from '@/lib/chains/edits'
import { withPartAt } from '@/lib/chains/fields'
import { nameRefusal } from '@/lib/chains/names'
import { unitAfter } from '@/lib/chains/outline'
import { integralUnits, type DecimateFilterType } from '@/lib/chains/stage-starts'
import type { LinkableDesign } from '@/lib/chains/types'
import { decimateWords } from '@/lib/chains/words'
import type { ChainDesk } from './chain-desk'
import { ChoiceField, NumberField, SwitchField } from './desk-fields'
import { NameWord, plainWord } from './name-word'
import { chainOptions, type ChainOption } from './statement-options'

/* Every field of a stage, by its kind. */

interface StageFieldsProps<Stage> {
  readonly stage: Stage
  readonly index: number
  readonly spec: ChainSpec
  readonly desk: ChainDesk
  readonly linkable: readonly LinkableDesign[]
  readonly readOnly: boolean
}

const put = (path: string, value: unknown) => (spec: ChainSpec) => withPartAt(spec, path, value)

export function SensorFields({ stage, index, ...rest }: StageFieldsProps<SensorStage>) {
  const at = `stages.${index}`
  const { spec, desk, readOnly } = rest
  const units = chainOptions(spec, `${at}.unit`, [])
  return (
    <>
      <span className="inline-flex min-h-7 items-baseline gap-x-1.5 text-[13px]">
        <span className="text-pencil">Name</span>
        <NameWord
          label="Name of the sensor on the desk"
          name={stage.name}
          look={plainWord}
          readOnly={readOnly}
          onName={(name) => nameRefusal(name) ?? desk.edit(put(`${at}.name`, name))}
        />
      </span>
      <NumberField {...rest} path={`${at}.sensitivity`} />
      <ChoiceField {...rest} label="for each" {...units} />
      <SwitchField
        {...rest}
        label="Resonance"
        isOn={stage.resonance !== null}
        onSwitch={(isOn) => put(`${at}.resonance`, isOn ? { f0Hz: 100 * spec.kept.toHz, q: 10 } : null)}
      >
        <NumberField {...rest} path={`${at}.resonance.f0Hz`} label="at" />
        <NumberField {...rest} path={`${at}.resonance.q`} label="Q" />
      </SwitchField>
      <SwitchField
        {...rest}
        label="High-pass of the charge amplifier or AC-coupled input"
        isOn={stage.highPass !== null}
        onSwitch={(isOn) =>
          put(`${at}.highPass`, isOn ? { cornerHz: spec.kept.fromHz > 0 ? spec.kept.fromHz / 5 : 0.1, order: 1 } : null)
        }
      >
        <NumberField {...rest} path={`${at}.highPass.cornerHz`} label="from" />
        <NumberField {...rest} path={`${at}.highPass.order`} label="order" />
      </SwitchField>
    </>
  )
}

export function AnalogFields({ stage, index, ...rest }: StageFieldsProps<AnalogStage>) {
  const at = `stages.${index}`
  const source = chainOptions(rest.spec, `${at}.source`, rest.linkable)
  const edges = stage.source.from === 'here' ? stage.source.analog.edgesHz.length : 0
  return (
    <>
      <ChoiceField {...rest} label="Filter" {...source} />
      {stage.source.from === 'here' ? (
        <>
          <ChoiceField {...rest} label="Family" {...chainOptions(rest.spec, `${at}.source.analog.family`, [])} />
          <ChoiceField {...rest} label="Response" {...chainOptions(rest.spec, `${at}.source.analog.response`, [])} />
          <NumberField {...rest} path={`${at}.source.analog.order`} />
          <NumberField {...rest} path={`${at}.source.analog.edgesHz.0`} label={edges > 1 ? 'Lower edge' : 'Edge'} />
          <NumberField {...rest} path={`${at}.source.analog.edgesHz.1`} />
          <NumberField {...rest} path={`${at}.source.analog.rippleDb`} />
          <NumberField {...rest} path={`${at}.source.analog.attenuationDb`} />
          {stage.source.analog.family === 'bessel' ? (
            <ChoiceField
              {...rest}
              label="Its edge is where"
              current={stage.source.analog.normalization ?? 'magnitude'}
              options={normalizations(`${at}.source.analog.normalization`)}
            />
          ) : null}
        </>
      ) : null}
    </>
  )
}

const normalizations = (path: string): readonly ChainOption[] =>
  [
    { value: 'magnitude', label: 'it is down 3\u2009dB' },
    { value: 'delay', label: 'its delay is normalised' },
    { value: 'phase', label: 'its phase is matched' },
  ].map((option) => ({ ...option, apply: put(path, option.value) }))

export function ConverterFields({ stage, index, ...rest }: StageFieldsProps<ConverterStage>) {
  const at = `stages.${index}`
  const { resolution } = stage
  return (
    <>
      <NumberField {...rest} path={`${at}.sampleRateHz`} label="Rate" />
      <ChoiceField
        {...rest}
        label="Resolution"
        current={resolution.by}
        options={[
          { value: 'bits', label: 'ideal bits', apply: put(`${at}.resolution`, { by: 'bits', bits: 16 }) },
          {
            value: 'noise',
            label: 'measured noise',
            apply: put(`${at}.resolution`, { by: 'noise', voltsPerRootHz: 1e-6 }),
          },
        ]}
      />
      <NumberField {...rest} path={`${at}.resolution.bits`} />
      <NumberField {...rest} path={`${at}.resolution.voltsPerRootHz`} />
      <NumberField {...rest} path={`${at}.fullScaleVolts`} label="Full scale ±" />
      <SwitchField
        {...rest}
        label="Averages over each sample"
        isOn={stage.averaging !== null}
        onSwitch={(isOn) => put(`${at}.averaging`, isOn ? { order: 1 } : null)}
      >
        <NumberField {...rest} path={`${at}.averaging.order`} label="order" />
      </SwitchField>
    </>
  )
}

const ownTypes: readonly Exclude<DecimateFilterType, 'design'>[] = ['half-band', 'kaiser', 'equiripple', 'cic']

export function DecimateFields({ stage, index, ...rest }: StageFieldsProps<DecimateStage>) {
  const at = `stages.${index}`
  const { filter } = stage
  const links = chainOptions(rest.spec, `${at}.filter`, rest.linkable)
  const options: readonly ChainOption[] = [
    ...ownTypes.map((type) => ({
      value: type,
      label: decimateWords[type],
      apply: (spec: ChainSpec) => withDecimateType(spec, index, type),
    })),
    ...links.options,
  ]
  return (
    <>
      <NumberField {...rest} path={`${at}.factor`} label="Down by" />
      <ChoiceField
        {...rest}
        label="Filter"
        current={filter.type === 'design' ? filter.link.designId : filter.type}
        options={options}
      />
      {filter.type === 'cic' ? (
        <>
          <NumberField {...rest} path={`${at}.filter.order`} />
          <NumberField {...rest} path={`${at}.filter.combDelay`} />
          <SwitchField
            {...rest}
            label="Droop compensated"
            isOn={filter.compensation !== null}
            onSwitch={(isOn) => (spec) =>
              withPartAt(spec, `${at}.filter.compensation`, isOn ? { taps: 15, passHz: spec.kept.toHz } : null)
            }
          >
            <NumberField {...rest} path={`${at}.filter.compensation.passHz`} label="to" />
            <NumberField {...rest} path={`${at}.filter.compensation.taps`} label="in" />
          </SwitchField>
        </>
      ) : (
        <>
          <NumberField {...rest} path={`${at}.filter.taps`} />
          <NumberField {...rest} path={`${at}.filter.passHz`} />
          <NumberField {...rest} path={`${at}.filter.stopHz`} />
          <NumberField {...rest} path={`${at}.filter.attenuationDb`} />
          <NumberField {...rest} path={`${at}.filter.stopWeight`} />
        </>
      )}
    </>
  )
}

export function ShapeFields({ stage, index, ...rest }: StageFieldsProps<ShapeStage>) {
  const at = `stages.${index}`
  const { filter } = stage
  const before = unitAfter(rest.spec, index - 1)
  const twice = integralUnits(before, 2).length > 0
  return (
    <>
      <ChoiceField {...rest} label="Shaped by" {...chainOptions(rest.spec, `${at}.filter`, rest.linkable)} />
      {filter.type === 'integrate' ? (
        <>
          <ChoiceField
            {...rest}
            label="Integrated"
            current={String(filter.times)}
            options={[
              { value: '1', label: 'once', apply: (spec) => withIntegrationTimes(spec, index, 1) },
              ...(twice || filter.times === 2
                ? [{ value: '2', label: 'twice', apply: (spec: ChainSpec) => withIntegrationTimes(spec, index, 2) }]
                : []),
            ]}
          />
          <ChoiceField {...rest} label="to" {...chainOptions(rest.spec, `${at}.filter.unit`, [])} />
          <NumberField {...rest} path={`${at}.filter.highPass.cornerHz`} />
          <NumberField {...rest} path={`${at}.filter.highPass.order`} />
        </>
      ) : null}
    </>
  )
}
