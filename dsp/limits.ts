/** How much of each there may be; apart from the schemas that hold them, for pages that only show specs. */

export const MOST_TAPS = 1024
export const MOST_MEASURED_ROWS = 2000
export const MOST_REQUIREMENTS = 40
