/** Stages that one chain may have. */
export const MOST_CHAIN_STAGES = 16
/** Factor of one decimation stage; the product over a chain may be as large as MOST_TOTAL_DECIMATION. */
export const MOST_DECIMATION = 256
export const MOST_TOTAL_DECIMATION = 1024
export const MOST_STAGE_TAPS = 512
/** An exchange of more takes longer than an edit may, and rarely converges. */
export const MOST_EQUIRIPPLE_TAPS = 256
export const MOST_INTERFERERS = 40
export const MOST_CHAIN_REQUIREMENTS = 24
/** Channels of one tolerance run. */
export const LEAST_CHANNELS = 100
export const MOST_CHANNELS = 20_000
/** Work of one tolerance run: channels times the sections that are drawn for each. */
export const MOST_CHANNEL_SECTIONS = 400_000
