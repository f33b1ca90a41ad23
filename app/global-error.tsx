'use client'

/** When even the frame could not be made; it stands alone, without fonts or styles of the app. */
export default function GlobalError({ retry }: { error: unknown; retry: () => void }) {
  return (
    <html lang="en">
      <head>
        <title>No answer · Polewright</title>
      </head>
      <body
        style={{
          font: '16px/1.5 sans-serif',
          margin: '48px auto',
          maxWidth: '36rem',
          padding: '0 16px',
          colorScheme: 'light dark',
        }}
      >
        <h1>This page could not be made</h1>
        <p>Something went wrong on our side, and what was saved is safe. Try again in a moment.</p>
        <button type="button" onClick={() => retry()}>
          Try again
        </button>
      </body>
    </html>
  )
}
