/** How the editable words of the statement look: set heavier, ruled below with dots, washed while they have the focus. */
export const wordLook = {
  frame:
    'font-semibold border-b border-dotted border-pencil px-px hover:bg-spruce-wash focus-within:bg-spruce-wash focus-within:border-solid focus-within:border-spruce focus-within:outline-2 focus-within:outline-spruce focus-within:outline-offset-2',
  refused: 'border-solid border-vermilion text-vermilion',
} as const
