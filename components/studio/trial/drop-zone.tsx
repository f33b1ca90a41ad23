'use client'

import { useRef, useState, type DragEvent, type ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { classNames } from '@/lib/format/class-names'

export interface FileTaker {
  onFile(file: File): void
}

/** Takes a dropped file anywhere on its ground. */
export function DropGround({ onFile, children }: FileTaker & { children: ReactNode }) {
  const [over, setOver] = useState(false)
  const carriesFile = (event: DragEvent) => event.dataTransfer.types.includes('Files')
  return (
    <div
      data-drop-ground
      className={classNames('min-w-0', over && 'outline-2 outline-offset-4 outline-spruce outline-dashed')}
      onDragOver={(event) => {
        if (!carriesFile(event)) return
        event.preventDefault()
        setOver(true)
      }}
      onDragLeave={(event) => {
        if (!(event.relatedTarget instanceof Node && event.currentTarget.contains(event.relatedTarget))) setOver(false)
      }}
      onDrop={(event) => {
        if (!carriesFile(event)) return
        event.preventDefault()
        setOver(false)
        const file = event.dataTransfer.files[0]
        if (file) onFile(file)
      }}
    >
      {children}
    </div>
  )
}

/** The browser's own file choice behind a button of ours. */
export function ChooseFile({
  onFile,
  kind = 'plain',
  small = false,
  label = 'Recording',
  children,
}: FileTaker & { kind?: 'primary' | 'plain'; small?: boolean; label?: string; children: ReactNode }) {
  const input = useRef<HTMLInputElement>(null)
  return (
    <>
      <Button kind={kind} small={small} onClick={() => input.current?.click()}>
        {children}
      </Button>
      <input
        ref={input}
        type="file"
        aria-label={label}
        tabIndex={-1}
        className="sr-only"
        onChange={(event) => {
          const file = event.target.files?.[0]
          // the same file may be chosen again after it was mended
          event.target.value = ''
          if (file) onFile(file)
        }}
      />
    </>
  )
}

/** The empty trial: what can be dropped here, and a recording to begin with. */
export function DropZone({ onFile, onDemo }: FileTaker & { onDemo(): void }) {
  return (
    <div className="flex flex-col items-center gap-3 border border-dashed border-graph-strong bg-sheet px-4 py-8 text-center">
      <p className="text-[15px]">Try the design on a recording: drop a WAV, CSV or TSV file here.</p>
      <p className="max-w-prose text-[13px] text-pencil">
        Any bit depth and channel count; any delimiter, decimal mark or time stamp. 500&#8239;MB at most. The file stays
        on this computer.
      </p>
      <div className="flex flex-wrap justify-center gap-3">
        <ChooseFile kind="primary" onFile={onFile}>
          Choose a file
        </ChooseFile>
        <Button onClick={onDemo}>Use the demo recording</Button>
      </div>
    </div>
  )
}
