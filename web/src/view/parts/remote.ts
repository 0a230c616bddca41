/** What a section asks of the worker while it is shown. */
import { useEffect, useRef, useState } from 'preact/hooks';

import { reportTrouble } from '../../shared/store';
import { Ended, type RemoteWorkbench, withWorkbench } from '../../shared/worker';

/**
 * The latest answer to a question that `key` names. A new key asks again; until
 * its answer comes, or when the workbench has none, the last one stays.
 */
export function useRemote<T>(
  key: string | null,
  ask: (bench: RemoteWorkbench) => Promise<T | undefined>,
): T | undefined {
  const question = useRef(ask);
  question.current = ask;
  const [answer, setAnswer] = useState<T>();
  useEffect(() => {
    if (key === null) return undefined;
    let wanted = true;
    withWorkbench((bench) => question.current(bench)).then(
      (value) => {
        if (wanted && value !== undefined) setAnswer(value);
      },
      (reason: unknown) => {
        if (wanted && !(reason instanceof Ended)) reportTrouble(reason);
      },
    );
    return () => {
      wanted = false;
    };
  }, [key]);
  return answer;
}
