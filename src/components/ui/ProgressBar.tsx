interface ProgressBarProps {
  /** What is being done: "Setting page 4 of 12". Announced when it changes. */
  label: string;
  /** Share done, 0 to 1; left out while it is not known. */
  done?: number | undefined;
}

/** Long work: what it is doing and how far it is. Twin of sheet/Progress.astro. */
export function ProgressBar({ label, done }: ProgressBarProps) {
  const percent = done === undefined ? undefined : Math.round(Math.min(1, Math.max(0, done)) * 100);
  return (
    <div className="progress">
      <div className="progress__line">
        <span role="status">{label}</span>
        {percent === undefined ? null : <span className="figure">{percent} %</span>}
      </div>
      <progress className="progress__bar" max={100} value={percent} aria-label={label} />
    </div>
  );
}
