/** The example problems that ship with the page, in the order of their files. */
import { type Dated, EMPTY_DOCUMENT, notice, openDocument, replaceDocument, sheet } from './store';
import type { Opened, ProblemDocument } from './generated/eigenledger';
import { withWorkbench } from './worker';

const files = import.meta.glob<string>('../../../www-examples/*.json', {
  query: '?raw',
  import: 'default',
  eager: true,
});

export interface Example {
  readonly key: string;
  readonly title: string;
  readonly json: string;
}

export const examples: readonly Example[] = Object.entries(files)
  .sort(([a], [b]) => a.localeCompare(b, 'en'))
  .map(([path, json]) => ({
    key: path.replace(/^.*\/|\.json$/g, ''),
    title: (JSON.parse(json) as { title: string }).title,
    json,
  }));

/** The first visit's example as it was put there, and the revision it got. */
let firstExample: Dated<ProblemDocument> | null = null;

/** Whether the page still shows the problem of a first visit, as it came. */
export function isUntouchedExample(): boolean {
  return firstExample !== null && firstExample.revision === sheet.value.revision;
}

/** Puts a matrix in place of the first example; what was typed beside that is kept. */
export function replaceExample(matrix: string): void {
  const { title, notes, claims } = sheet.value.value;
  const before = firstExample?.value;
  replaceDocument({
    ...EMPTY_DOCUMENT,
    title: title === before?.title ? '' : title,
    notes: notes === before?.notes ? '' : notes,
    claims,
    matrix,
  });
}

async function open(example: Example, put: (document: ProblemDocument) => void): Promise<void> {
  const opened = await withWorkbench(async (bench): Promise<Opened> => bench.open_file(new TextEncoder().encode(example.json), `${example.key}.json`));
  if (opened.outcome === 'document') put(opened.document);
  else if (opened.outcome === 'refused') notice.value = { tone: 'trouble', text: opened.reason };
}

/** Opens the example of that key in place of the document. */
export async function openExample(key: string): Promise<void> {
  const example = examples.find((candidate) => candidate.key === key);
  if (example === undefined) return;
  await open(example, (document) => { openDocument(document, `${document.title} is open.`); });
}

/** What a first visit opens on. */
export async function openFirstExample(): Promise<void> {
  const [example] = examples;
  if (example === undefined) return;
  // In silence: a notice about a link that could not be opened has to stay.
  await open(example, replaceDocument);
  firstExample = sheet.value;
}
