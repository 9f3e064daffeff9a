import { useEffect, useRef, useState } from 'react';
import * as z from 'zod/mini';
import { Notice } from '#components/ui/Notice.tsx';
import { useUnits } from '#components/fitting/unit-choice.ts';
import type { ShownPicture } from '#components/plan/ProseView.tsx';
import type { Problem, UnitSystem } from '#lib/plan/types.ts';
import { paths } from '#lib/paths.ts';
import { DraftPreview } from './DraftPreview.tsx';
import { SourceEditor } from './SourceEditor.tsx';
import { useCompiled } from './use-compiled.ts';

interface StudioProps {
  planId: string;
  initialSource: string;
  initialVersion: number;
  units: UnitSystem;
  pictures: Record<string, ShownPicture>;
}

type SaveState =
  { state: 'saved' } | { state: 'changed' } | { state: 'saving' } | { state: 'refused'; message: string };

/** What the server says to a saved draft, or why it was not taken. */
const savedSchema = z.object({ version: z.optional(z.number()), detail: z.optional(z.string()) });

const SEVERITY_WORDS = { error: 'To mend', warning: 'Look at this', advice: 'Advice' } as const;

/** Writing a plan: the text at the left, what it comes to at the right, problems where they stand. */
export function Studio({
  planId,
  initialSource,
  initialVersion,
  units: initialUnits,
  pictures,
}: StudioProps) {
  const units = useUnits(initialUnits);
  const [source, setSource] = useState(initialSource);
  const [generation, setGeneration] = useState(0);
  const [saving, setSaving] = useState<SaveState>({ state: 'saved' });
  const [goTo, setGoTo] = useState<{ line: number; column: number; at: number } | null>(null);
  const version = useRef(initialVersion);
  const { answer, isWorking } = useCompiled(source);
  const problems = answer?.problems ?? [];

  async function save() {
    setSaving({ state: 'saving' });
    try {
      const response = await fetch(paths.draft(planId), {
        method: 'PUT',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify({ source, version: version.current }),
      });
      const answer = savedSchema.safeParse(await response.json());
      if (response.ok && answer.data?.version) {
        version.current = answer.data.version;
        setSaving({ state: 'saved' });
      } else {
        setSaving({
          state: 'refused',
          message: answer.data?.detail ?? 'The server did not take it. Your text is still here.',
        });
      }
    } catch {
      setSaving({
        state: 'refused',
        message: 'The server does not answer. Your text is still here; save again in a moment.',
      });
    }
  }

  // Leaving with a changed text asks first.
  const isUnsaved = saving.state !== 'saved';
  useEffect(() => {
    if (!isUnsaved) return undefined;
    const ask = (event: BeforeUnloadEvent) => {
      event.preventDefault();
    };
    window.addEventListener('beforeunload', ask);
    return () => {
      window.removeEventListener('beforeunload', ask);
    };
  }, [isUnsaved]);

  return (
    <div className="studio">
      <div className="studio__text">
        <SourceEditor
          source={source}
          generation={generation}
          problems={problems}
          goTo={goTo}
          onChange={(text) => {
            setSource(text);
            setSaving({ state: 'changed' });
          }}
          onSave={() => {
            void save();
          }}
        />
        <div className="actions studio__save">
          <button
            type="button"
            className="button"
            onClick={() => {
              void save();
            }}
            disabled={saving.state === 'saving'}
          >
            Save the draft
          </button>
          <label className="button studio__upload">
            Upload a text
            <input
              type="file"
              accept=".mdx,.md,text/markdown,text/plain"
              className="unseen"
              onChange={(event) => {
                const file = event.target.files?.[0];
                event.target.value = '';
                if (!file) return;
                void file.text().then((text) => {
                  setSource(text);
                  setGeneration((before) => before + 1);
                  setSaving({ state: 'changed' });
                });
              }}
            />
          </label>
          <span role="status" className="small secondary">
            {saving.state === 'saved'
              ? 'All is saved.'
              : saving.state === 'saving'
                ? 'Saving …'
                : saving.state === 'changed'
                  ? 'Not saved yet.'
                  : ''}
          </span>
        </div>
        {saving.state === 'refused' ? (
          <Notice kind="error" title="Not saved">
            <p>{saving.message}</p>
          </Notice>
        ) : null}
        <ProblemList
          problems={problems}
          isWorking={isWorking}
          onPick={(problem) => {
            setGoTo({ line: problem.line, column: problem.column, at: Date.now() });
          }}
        />
      </div>
      <div className="studio__result" aria-label="What the plan comes to" role="region">
        {answer?.plan ? (
          <DraftPreview plan={answer.plan} units={units} pictures={pictures} />
        ) : (
          <p className="secondary">
            {answer ? 'The plan shows here as soon as the text is mended.' : 'Reading the plan …'}
          </p>
        )}
      </div>
    </div>
  );
}

interface ProblemListProps {
  problems: readonly Problem[];
  isWorking: boolean;
  onPick: (problem: Problem) => void;
}

function ProblemList({ problems, isWorking, onPick }: ProblemListProps) {
  return (
    <section aria-labelledby="problems-title" className="studio__problems">
      <h3 id="problems-title">
        {problems.length === 0
          ? 'No problems'
          : problems.length === 1
            ? 'One problem'
            : `${problems.length} problems`}
        {isWorking ? <span className="small secondary"> reading …</span> : null}
      </h3>
      <ul role="status">
        {problems.slice(0, 50).map((problem) => (
          <li key={`${problem.line}:${problem.column}:${problem.rule}`}>
            <button
              type="button"
              className="button button--plain"
              onClick={() => {
                onPick(problem);
              }}
            >
              Line {problem.line}
            </button>{' '}
            <strong>{SEVERITY_WORDS[problem.severity]}:</strong> {problem.message}
            {problem.hint ? <span className="secondary"> {problem.hint}</span> : null}
          </li>
        ))}
      </ul>
    </section>
  );
}
