/** The mark: a cuvette crossed by water that falls over a weir. */
export function WeirMark({ isSmall = false }: { isSmall?: boolean }) {
  return (
    <span className="mark">
      <svg
        width="22"
        height="22"
        viewBox="0 0 24 24"
        fill="none"
        strokeWidth="2.2"
        strokeLinecap="round"
        strokeLinejoin="round"
        aria-hidden="true"
      >
        <path className="mark-line" d="M7 4v14a2 2 0 0 0 2 2h6a2 2 0 0 0 2-2V4" />
        <path className="mark-beam" d="M3 8.5h4l10 5h4" />
      </svg>
      <span className={isSmall ? 'mark-word' : undefined}>weirlight</span>
    </span>
  )
}
