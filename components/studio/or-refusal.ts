import { DesignError } from '@/dsp'

/** A refusal is an answer here, not an accident. */
export function orRefusal<Value>(make: () => Value): Value | DesignError {
  try {
    return make()
  } catch (error) {
    if (error instanceof DesignError) return error
    throw error
  }
}
