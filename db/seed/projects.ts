import type { DesignSpec } from '@/dsp'
import {
  delayFreeBudget,
  firSpec,
  fittedTo,
  heldAt,
  heldAtEdges,
  impulseInvariant,
  matchedZ,
  mounted,
  notHeld,
  spec,
} from './specs'

/*
 * The demo: what a small measurement team has on its desk. Each history is one that such a filter really has; the notes say why the next
 * version was needed.
 */

export interface SeedVersion {
  readonly spec: DesignSpec
  readonly note: string
  readonly by: 'owner' | 'designer'
  /** Days before the demo is planted, so that it looks recent whenever that is. */
  readonly daysAgo: number
}

export interface SeedDesign {
  readonly title: string
  readonly versions: readonly SeedVersion[]
}

export interface SeedProject {
  readonly code: string
  readonly name: string
  readonly designs: readonly SeedDesign[]
}

const footbridge: SeedProject = {
  code: 'HMF',
  name: 'Harrow Mill footbridge monitor',
  designs: [
    {
      title: 'Deck accelerometer, logger low-pass',
      versions: [
        {
          spec: spec({ family: 'butterworth', response: 'lowpass', order: 2, edgesHz: [120] }, 600, notHeld),
          note: 'First cut at the rate that the installed loggers run at.',
          by: 'designer',
          daysAgo: 61,
        },
        {
          spec: spec({ family: 'butterworth', response: 'lowpass', order: 2, edgesHz: [120] }, 600, heldAt(120)),
          note: 'Version 1 was down 3 dB at 107 Hz instead of 120 Hz: the transform bends the axis. Held at the corner now.',
          by: 'designer',
          daysAgo: 58,
        },
        {
          spec: {
            ...spec({ family: 'butterworth', response: 'lowpass', order: 4, edgesHz: [120] }, 600, heldAt(120)),
            sheet: [
              { kind: 'pass', fromHz: 0, toHz: 80, withinDb: 0.2 },
              { kind: 'lose-tone', hz: 250, attenuationDb: 50 },
              { kind: 'phase-departure', upToHz: 60, withinDegrees: 5, removeDelay: true },
              { kind: 'overshoot', atMostPercent: 15 },
            ],
          },
          note: 'Order 4 for the hanger rattle at 250 Hz. Phase leaves the analog one well below the corner; see Rates before agreeing to 600 Hz.',
          by: 'owner',
          daysAgo: 33,
        },
      ],
    },
    {
      title: 'Structural modes, low-pass at 50 Hz',
      versions: [
        {
          spec: spec(
            { family: 'chebyshev1', response: 'lowpass', order: 5, edgesHz: [50], rippleDb: 0.5 },
            400,
            heldAtEdges,
          ),
          note: 'Steepest slope for the order; keeps the generator at 75 Hz out.',
          by: 'designer',
          daysAgo: 55,
        },
        {
          spec: spec({ family: 'butterworth', response: 'lowpass', order: 6, edgesHz: [50] }, 400, heldAtEdges),
          note: 'The 0.5 dB ripple showed as differences between modal amplitudes. Flat pass band, one order more.',
          by: 'designer',
          daysAgo: 41,
        },
        {
          spec: {
            ...spec({ family: 'butterworth', response: 'lowpass', order: 6, edgesHz: [50] }, 800, heldAtEdges),
            sheet: [
              { kind: 'pass', fromHz: 0, toHz: 35, withinDb: 0.1 },
              { kind: 'stop', fromHz: 75, attenuationDb: 20 },
              { kind: 'phase-departure', upToHz: 50, withinDegrees: 3, removeDelay: false },
              { kind: 'cost', atMostMultiplies: 20 },
            ],
          },
          note: 'Twice the rate, so that the phase between channels can be compared with the analog test rig up to 50 Hz.',
          by: 'owner',
          daysAgo: 20,
        },
      ],
    },
    {
      title: 'Deck and hanger pair, equal delay',
      versions: [
        {
          spec: spec(
            { family: 'bessel', response: 'lowpass', order: 4, edgesHz: [40], normalization: 'magnitude' },
            160,
            heldAtEdges,
            delayFreeBudget,
          ),
          note: 'Flat delay, so that a wave front reaches both channels in the same shape.',
          by: 'designer',
          daysAgo: 47,
        },
        {
          spec: spec(
            { family: 'bessel', response: 'lowpass', order: 4, edgesHz: [40], normalization: 'magnitude' },
            1000,
            heldAtEdges,
            delayFreeBudget,
          ),
          note: 'At 160 Hz the delay was no longer flat above 20 Hz. The loggers can do 1 kHz on two channels.',
          by: 'designer',
          daysAgo: 40,
        },
        {
          spec: spec(
            { family: 'bessel', response: 'lowpass', order: 4, edgesHz: [40], normalization: 'magnitude' },
            1000,
            impulseInvariant,
            delayFreeBudget,
          ),
          note: 'Impulse-invariant follows the analog delay more closely here; aliasing stays below what the converter resolves.',
          by: 'owner',
          daysAgo: 12,
        },
      ],
    },
    {
      title: 'Tower sway, slow channel',
      versions: [
        {
          spec: spec({ family: 'critically-damped', response: 'lowpass', order: 2, edgesHz: [4] }, 100, heldAtEdges),
          note: 'No overshoot after a gust: the alarm reads the peak of this channel.',
          by: 'designer',
          daysAgo: 36,
        },
        {
          spec: spec({ family: 'critically-damped', response: 'lowpass', order: 2, edgesHz: [2.5] }, 100, heldAtEdges),
          note: 'Corner down to 2.5 Hz; the second harmonic of footfall, near 4 Hz, came through.',
          by: 'designer',
          daysAgo: 29,
        },
      ],
    },
  ],
}

const pumpHall: SeedProject = {
  code: 'SPH',
  name: 'Sluice pump hall, condition monitoring',
  designs: [
    {
      title: 'Casing velocity, 10 Hz to 1 kHz',
      versions: [
        {
          spec: spec({ family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [10, 1000] }, 5120, notHeld),
          note: 'The band in which machine vibration is judged, at the analyser’s usual rate.',
          by: 'designer',
          daysAgo: 52,
        },
        {
          spec: spec({ family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [10, 1000] }, 5120, heldAtEdges),
          note: 'Upper edge had slid to 897 Hz. Both edges held.',
          by: 'designer',
          daysAgo: 51,
        },
        {
          spec: spec(
            { family: 'butterworth', response: 'bandpass', order: 3, edgesHz: [10, 1000] },
            10_240,
            heldAtEdges,
          ),
          note: 'Order 3 at 10.24 kHz: the integrator behind it needs more of the drift below 10 Hz taken off.',
          by: 'owner',
          daysAgo: 24,
        },
        {
          spec: spec({ family: 'butterworth', response: 'bandpass', order: 3, edgesHz: [10, 1000] }, 10_240, matchedZ),
          note: 'Tried matched-z for its slope above 2 kHz. Kept for comparison with version 3.',
          by: 'designer',
          daysAgo: 9,
        },
      ],
    },
    {
      title: 'Mains hum, band-stop around 50 Hz',
      versions: [
        {
          spec: spec(
            { family: 'elliptic', response: 'bandstop', order: 2, edgesHz: [46, 54], rippleDb: 0.1, attenuationDb: 40 },
            2000,
            heldAtEdges,
          ),
          note: 'Deep and narrow, as first asked for.',
          by: 'designer',
          daysAgo: 44,
        },
        {
          spec: spec({ family: 'butterworth', response: 'bandstop', order: 2, edgesHz: [47, 53] }, 2000, heldAtEdges),
          note: 'The blade line at 44 Hz must read true: no ripple beside the gap, and the gap narrower by 2 Hz.',
          by: 'owner',
          daysAgo: 30,
        },
      ],
    },
    {
      title: 'Ahead of the decimation by four',
      versions: [
        {
          spec: spec(
            { family: 'chebyshev1', response: 'lowpass', order: 8, edgesHz: [2000], rippleDb: 0.1 },
            20_480,
            heldAtEdges,
          ),
          note: 'Pass band to 2 kHz before the rate falls to 5.12 kHz.',
          by: 'designer',
          daysAgo: 49,
        },
        {
          spec: spec(
            { family: 'chebyshev2', response: 'lowpass', order: 9, edgesHz: [3120], attenuationDb: 80 },
            20_480,
            heldAtEdges,
          ),
          note: 'Flat below, 80 dB from 3.12 kHz, where images fold into the band. But well down at 2 kHz already.',
          by: 'designer',
          daysAgo: 43,
        },
        {
          spec: spec(
            { family: 'elliptic', response: 'lowpass', order: 8, edgesHz: [2000], rippleDb: 0.05, attenuationDb: 80 },
            20_480,
            heldAtEdges,
          ),
          note: 'Both wishes in order 8: 0.05 dB to 2 kHz, 80 dB down where it folds.',
          by: 'owner',
          daysAgo: 15,
        },
        {
          spec: firSpec(
            {
              kind: 'equiripple',
              response: 'lowpass',
              taps: 67,
              bands: [
                { fromHz: 0, toHz: 2000, gain: 1, weight: 1 },
                { fromHz: 3120, toHz: 10_240, gain: 0, weight: 50 },
              ],
            },
            20_480,
            [
              { kind: 'pass', fromHz: 0, toHz: 2000, withinDb: 0.05 },
              { kind: 'stop', fromHz: 3120, attenuationDb: 80 },
              { kind: 'delay-spread', fromHz: 0, toHz: 2000, atMostSeconds: 1e-5 },
            ],
          ),
          note: 'The same two wishes as taps: the delay is one number for all channels, at four times the work.',
          by: 'designer',
          daysAgo: 6,
        },
      ],
    },
  ],
}

const operatorSeat: SeedProject = {
  code: 'OSL',
  name: 'Operator’s seat, wheel loader',
  designs: [
    {
      title: 'Seat cushion, whole-body band 0.4 Hz to 100 Hz',
      versions: [
        {
          spec: spec({ family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [0.4, 100] }, 500, heldAtEdges),
          note: 'Band limits for whole-body vibration. Weighting follows in a stage of its own.',
          by: 'designer',
          daysAgo: 38,
        },
        {
          spec: spec({ family: 'butterworth', response: 'bandpass', order: 2, edgesHz: [0.4, 100] }, 2000, heldAtEdges),
          note: 'At 500 Hz the upper slope fell too steeply to stay inside the tolerance above 80 Hz. 2 kHz leaves room.',
          by: 'designer',
          daysAgo: 17,
        },
      ],
    },
    {
      title: 'Seat back, smoothing for the display',
      versions: [
        {
          spec: spec(
            { family: 'bessel', response: 'lowpass', order: 3, edgesHz: [8], normalization: 'delay' },
            200,
            heldAtEdges,
          ),
          note: 'Constant 20 ms or so of delay, no ringing on kerbs.',
          by: 'designer',
          daysAgo: 35,
        },
        {
          spec: spec(
            { family: 'bessel', response: 'lowpass', order: 3, edgesHz: [8], normalization: 'magnitude' },
            200,
            heldAtEdges,
          ),
          note: 'Stated by its −3 dB point, as the test plan does.',
          by: 'owner',
          daysAgo: 27,
        },
      ],
    },
    {
      title: 'Axle accelerometer on its mount',
      versions: [
        {
          spec: mounted('Axle mount, 90 Hz', 90, 0.25, 500, notHeld),
          note: 'The mount rings at 90 Hz, as the impact test showed; stated by its poles, so that the logger can be held against it.',
          by: 'designer',
          daysAgo: 14,
        },
        {
          spec: mounted('Axle mount, 90 Hz', 90, 0.25, 500, fittedTo(200)),
          note: 'Fitted up to 200 Hz: half a decibel and four degrees at most, where the transforms are off by 15 dB.',
          by: 'designer',
          daysAgo: 5,
        },
      ],
    },
    {
      title: 'Cab floor, drift taken off',
      versions: [
        {
          spec: spec({ family: 'butterworth', response: 'highpass', order: 1, edgesHz: [0.1] }, 500, heldAtEdges),
          note: 'As the old analog amplifier did it.',
          by: 'designer',
          daysAgo: 34,
        },
        {
          spec: spec({ family: 'butterworth', response: 'highpass', order: 2, edgesHz: [0.2] }, 500, heldAtEdges),
          note: 'Tilt of the machine on slopes still showed in displacement; order 2 and twice the corner.',
          by: 'designer',
          daysAgo: 10,
        },
      ],
    },
  ],
}

export const seedProjects: readonly SeedProject[] = [footbridge, pumpHall, operatorSeat]
