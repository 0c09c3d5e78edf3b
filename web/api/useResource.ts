import { useCallback, useEffect, useEffectEvent, useState } from 'react';
import { asProblem } from './http.ts';
import type { Problem } from './problem.ts';

export interface Resource<Value> {
  /** The last answer; stays in view while a newer one is on its way. */
  readonly value: Value | null;
  readonly problem: Problem | null;
  readonly loading: boolean;
  readonly reload: () => void;
  /** Replaces the value with one the service has just answered elsewhere. */
  readonly setValue: (value: Value) => void;
}

/** Reads something from the service, again whenever `key` changes; a late answer to an old question is dropped. */
export function useResource<Value>(key: string, read: (signal: AbortSignal) => Promise<Value>): Resource<Value> {
  const [state, setState] = useState<{ key: string; value: Value | null; problem: Problem | null; loading: boolean }>({
    key,
    value: null,
    problem: null,
    loading: true,
  });
  const [attempt, setAttempt] = useState(0);
  const readNow = useEffectEvent(read);

  // biome-ignore lint/correctness/useExhaustiveDependencies: `attempt` asks the same question again
  useEffect(() => {
    const asked = new AbortController();
    setState((before) => ({ ...before, key, loading: true }));
    readNow(asked.signal).then(
      (value) => {
        if (!asked.signal.aborted) setState({ key, value, problem: null, loading: false });
      },
      (error) => {
        if (!asked.signal.aborted) setState((before) => ({ ...before, problem: asProblem(error), loading: false }));
      },
    );
    return () => asked.abort();
  }, [key, attempt]);

  const reload = useCallback(() => setAttempt((count) => count + 1), []);
  const setValue = useCallback(
    (value: Value) => setState((before) => ({ ...before, value, problem: null, loading: false })),
    [],
  );
  return { value: state.value, problem: state.problem, loading: state.loading, reload, setValue };
}
