/**
 * Version of the numbers. It is stored with every saved version of a design; it rises whenever a coefficient of any design could
 * change in its last digits, so that a recomputation knows what it is compared with.
 */
export const ENGINE_VERSION = '1.0.0'
