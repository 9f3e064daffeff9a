interface PartMarkProps {
  mark: string;
  /** The part's name, for the pointer. */
  name?: string;
}

/** The mark of a part in its circle; pointing at it lights the part everywhere. Twin of sheet/PartMark.astro. */
export function PartMark({ mark, name }: PartMarkProps) {
  return (
    <span className="part-mark" data-mark={mark} title={name}>
      <span className="unseen">Part </span>
      {mark}
    </span>
  );
}
