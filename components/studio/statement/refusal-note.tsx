import { Button } from '@/components/ui/button'

/** Why a word was refused, right beside it (on a narrow page beneath it), with the nearest value that works as one press. */
export function RefusalNote({
  id,
  message,
  nearestText,
  onUseNearest,
}: {
  id: string
  message: string
  nearestText?: string | undefined
  onUseNearest?: (() => void) | undefined
}) {
  return (
    <span
      id={id}
      role="alert"
      className="mx-2 my-1 inline-flex max-w-[26rem] max-sm:mx-0 max-sm:flex max-sm:w-fit flex-wrap items-center gap-x-2 gap-y-1 border-l-2 border-vermilion bg-sheet py-0.5 pr-1 pl-2 align-middle whitespace-normal font-text text-[13px] leading-5 font-normal text-vermilion"
    >
      <span>{message}</span>
      {nearestText && onUseNearest ? (
        <Button small onMouseDown={(event) => event.preventDefault()} onClick={onUseNearest}>
          Use {nearestText}
        </Button>
      ) : null}
    </span>
  )
}
