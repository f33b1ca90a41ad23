'use client'

import { useSyncExternalStore } from 'react'

const never = () => () => undefined

/**
 * False while the server renders and while its page is taken over. Numbers shown to their last digit belong in the browser alone: two
 * engines' sines may differ in that digit.
 */
export const useOnPage = (): boolean =>
  useSyncExternalStore(
    never,
    () => true,
    () => false,
  )
