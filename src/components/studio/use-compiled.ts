import { useEffect, useRef, useState } from 'react';
import type { CompileAnswer, CompileRequest } from './compile-worker.ts';

/** Longest pause in typing that still counts as typing, in milliseconds. */
const PAUSE_MS = 200;

/**
 * The plan that a text compiles to, worked out beside the page while somebody types. The last answer stays until the next one is there;
 * null before the first.
 */
export function useCompiled(source: string): { answer: CompileAnswer | null; isWorking: boolean } {
  const worker = useRef<Worker | null>(null);
  const asked = useRef(0);
  const [answer, setAnswer] = useState<CompileAnswer | null>(null);
  const [isWorking, setIsWorking] = useState(true);

  useEffect(() => {
    const made = new Worker(new URL('./compile-worker.ts', import.meta.url), { type: 'module' });
    made.onmessage = (event: MessageEvent<CompileAnswer>) => {
      if (event.data.id !== asked.current) return;
      setAnswer(event.data);
      setIsWorking(false);
    };
    worker.current = made;
    return () => {
      made.terminate();
      worker.current = null;
    };
  }, []);

  useEffect(() => {
    const timer = setTimeout(() => {
      asked.current += 1;
      const request: CompileRequest = { id: asked.current, source };
      setIsWorking(true);
      worker.current?.postMessage(request);
    }, PAUSE_MS);
    return () => {
      clearTimeout(timer);
    };
  }, [source]);

  return { answer, isWorking };
}
