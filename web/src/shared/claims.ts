/** Another program's output files as a claim. */
import type { ClaimedFiles } from './generated/eigenledger';
import { changeDocument, notice, reportTrouble, sheet } from './store';
import { withWorkbench } from './worker';

/** Adds the claim that the files make to the claims there are. */
export async function claimFiles(files: readonly File[]): Promise<void> {
  try {
    const names = files.map((file) => file.name);
    const contents = await Promise.all(files.map(async (file) => new Uint8Array(await file.arrayBuffer())));
    const made = await withWorkbench(async (bench): Promise<ClaimedFiles | undefined> => bench.claim_of_files(names, contents));
    if (made === undefined) {
      notice.value = { tone: 'trouble', text: 'There is no solved problem yet to hold the files against.' };
    } else if (made.outcome === 'refused') {
      notice.value = { tone: 'trouble', text: made.reason };
    } else {
      const before = sheet.value.value.claims ?? [];
      changeDocument({ claims: [...before, made.text] });
      const run = () => {
        changeDocument({ claims: before });
        notice.value = null;
      };
      notice.value = { tone: 'information', text: `${names.join(', ')}: claimed.`, action: { label: 'take it back', run } };
    }
  } catch (reason) {
    reportTrouble(reason);
  }
}
