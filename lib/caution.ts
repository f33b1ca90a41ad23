/** Stands on every sheet, and in every file that is handed over. */
export const caution =
  'A design aid; confirm on the target hardware. Where people or structures depend on the measurement, the applicable local codes ' +
  'and a licensed practitioner decide.'
