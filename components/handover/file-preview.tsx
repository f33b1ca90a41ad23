'use client'

import { useState } from 'react'
import { Button, buttonClass } from '@/components/ui/button'
import type { Preview } from './draft-file'

/** The first lines of the file as it will be, and the ways to take it. */
export function FilePreview({
  href,
  preview,
}: {
  /** null while what is chosen can't be had. */
  href: string | null
  preview: Preview
  /** Why this browser can't compute the version, which the server still hands over. */
}) {
  const [copied, setCopied] = useState('')
  const file = 'file' in preview ? preview.file : null

  async function copy() {
    if (!file) return
    try {
      await navigator.clipboard.writeText(file.text)
      setCopied(`${file.fileName} is on the clipboard`)
    } catch {
      // The browser may forbid the clipboard, on plain http for one; downloading always works.
      setCopied('This browser didn’t allow it; download the file instead')
    }
  }

  return (
    <>
      <div
        role="region"
        tabIndex={0}
        aria-label={file ? `First lines of ${file.fileName}` : 'Preview'}
        className="h-80 min-w-0 lg:h-[27rem] overflow-auto border border-graph-strong bg-paper p-3 -outline-offset-2"
      >
        {'file' in preview ? (
          <pre className="numeric text-[12px] leading-[1.45]">
            {preview.firstLines}
            {preview.restLines > 0 ? `\n… ${preview.restLines} more lines` : ''}
          </pre>
        ) : (
          <p className="text-[14px] text-pencil">
            Nothing to preview with these choices; the reason stands beside the choice.
          </p>
        )}
      </div>
      <div className="flex flex-wrap items-center gap-2">
        {href === null ? (
          <Button kind="primary" disabled>
            Download
          </Button>
        ) : (
          <a className={buttonClass('primary')} href={href} download={file?.fileName ?? true}>
            Download {file?.fileName}
          </a>
        )}
        <Button disabled={file === null || href === null} onClick={() => void copy()}>
          Copy
        </Button>
        <span className="text-[13px] text-pencil">
          {file ? `${new TextEncoder().encode(file.text).length} bytes` : null}
        </span>
        <span role="status" className="text-[13px] text-moss">
          {copied}
        </span>
      </div>
    </>
  )
}
