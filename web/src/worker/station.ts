/**
 * What a worker answers calls on: the Rust `Workbench`, and batches, which
 * cross to the worker and back as a whole.
 */
import { Workbench, type ProblemDocument, type Reading, type TextReading } from '../shared/generated/eigenledger';

/** What came of one problem of a batch. */
export interface BatchResult {
  /** The eigenvalues as figures, ascending; empty when there are none. */
  readonly values: readonly string[];
  /** Fingerprint of problem and result; empty without a result. */
  readonly fingerprint: string;
  /** Why there are no values, as sentences; empty when there are. */
  readonly trouble: readonly string[];
}

const nobodyListens = () => undefined;

function withoutValues(trouble: readonly string[]): BatchResult {
  return { values: [], fingerprint: '', trouble };
}

/** What keeps one text from being solved. */
function* obstacles({ diagnostics, question, disagreements }: TextReading): Iterable<string> {
  for (const { message } of diagnostics) yield message;
  if (question !== undefined) yield question.text;
  if (disagreements !== undefined) {
    yield `This is not Hermitian: pairs of mirrored cells that disagree: ${String(disagreements.total)}.`;
  }
}

function whyNotReady({ matrix, metric }: Reading): string[] {
  const found = [...obstacles(matrix), ...(metric === undefined ? [] : obstacles(metric))];
  return found.length > 0 ? found : ['This cannot be solved as it stands.'];
}

export class Station extends Workbench {
  /** Solves each problem in turn, with `limit` digits as `values` takes it; the last one stays open. */
  solveAll(documents: readonly ProblemDocument[], limit: number): BatchResult[] {
    return documents.map((document) => this.solveOne(document, limit));
  }

  private solveOne(document: ProblemDocument, limit: number): BatchResult {
    const reading = this.read(document);
    if (!reading.ready) return withoutValues(whyNotReady(reading));
    const { fingerprint, trouble } = this.solve(nobodyListens);
    if (trouble !== undefined) return withoutValues([trouble]);
    return { values: this.values(limit)?.rows.map(({ figure }) => figure) ?? [], fingerprint, trouble: [] };
  }
}
