import { Notice } from '#components/ui/Notice.tsx';

interface RequirementListProps {
  requirements: readonly { holds: boolean; message: string }[];
  /** Why the piece cannot be built at these sizes though every requirement holds. */
  impossible?: readonly string[];
}

/** Whether the piece can be built at these sizes, and if not, why not. Announced when it changes. */
export function RequirementList({ requirements, impossible = [] }: RequirementListProps) {
  const broken = [
    ...requirements.filter((requirement) => !requirement.holds).map((requirement) => requirement.message),
    ...impossible,
  ];
  return (
    <div role="status">
      {broken.length === 0 ? (
        <Notice kind="holds" title="It can be built at this size" />
      ) : (
        <Notice kind="caution" title="It cannot be built at this size">
          <ul>
            {broken.map((message) => (
              <li key={message}>{message}</li>
            ))}
          </ul>
        </Notice>
      )}
    </div>
  );
}
