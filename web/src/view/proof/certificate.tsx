/** The certificate: everything another program needs to check the proof. */
import { saveFile } from '../../shared/files';
import { reportTrouble, sheet, solution } from '../../shared/store';
import { withWorkbench } from '../../shared/worker';

async function download(): Promise<void> {
  try {
    const file = await withWorkbench(async (bench) => {
      await bench.take_heading(sheet.value.value);
      return bench.certificate();
    });
    if (file !== undefined) saveFile(file.name, file.mediaType, file.text);
  } catch (reason) {
    reportTrouble(reason);
  }
}

export function Certificate() {
  return (
    <p class="screen-only">
      <button type="button" disabled={solution.value === null} onClick={() => void download()}>
        Download the certificate
      </button>{' '}
      <span class="soft">problem, vectors and bounds, for another program to check</span>
    </p>
  );
}
