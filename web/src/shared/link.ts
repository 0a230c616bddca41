/** The problem in the address: a fragment that Rust writes, checks and reads. */
import { notice, openDocument, reportTrouble, sheet } from './store';
import type { Opened } from './generated/eigenledger';
import { withWorkbench } from './worker';

/** The address of this page with the current problem in its fragment. */
export async function linkToProblem(): Promise<string> {
  const fragment = await withWorkbench((bench) => bench.link_encode(sheet.value.value));
  const address = new URL(location.href);
  address.hash = fragment;
  return address.href;
}

/**
 * Opens the problem in the address, if there is one. A fragment that cannot be
 * read whole changes nothing but says so.
 *
 * @returns whether the document was replaced.
 */
export async function openLink(): Promise<boolean> {
  const fragment = location.hash.slice(1);
  if (fragment === '') return false;
  try {
    const opened = await withWorkbench(async (bench): Promise<Opened> => bench.link_decode(fragment));
    if (opened.outcome === 'document') {
      openDocument(opened.document, 'The problem in the link is open.');
      // A reload is to bring back what was made of it since, not the link again.
      history.replaceState(null, '', location.href.split('#')[0]);
      return true;
    }
    if (opened.outcome === 'refused') notice.value = { tone: 'trouble', text: opened.reason };
  } catch (reason) {
    reportTrouble(reason);
  }
  return false;
}

/** A link pasted into the address bar of an open page is a problem to open. */
export function followLinks(): void {
  addEventListener('hashchange', () => void openLink());
}
