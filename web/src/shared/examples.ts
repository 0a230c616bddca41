/** The example problems that ship with the page, in the order of their files. */
import { notice, openDocument, replaceDocument, sheet } from './store';
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

/** Revision of the document when the first visit's example was put there. */
let firstExampleRevision: number | null = null;

/** Whether the page still shows the example of a first visit, as it came. */
export function isUntouchedExample(): boolean {
  return firstExampleRevision === sheet.value.revision;
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
  firstExampleRevision = sheet.value.revision;
}
