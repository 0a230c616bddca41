/** Files in and out. What a file holds is decided by Rust from its bytes. */
import { EMPTY_DOCUMENT, notice, openDocument, reportTrouble } from './store';
import type { Opened } from './generated/eigenledger';
import { withWorkbench } from './worker';

/** Larger files are refused before they are read into memory. */
const LARGEST_FILE_BYTES = 64 * 1024 * 1024;

/** Opens a file into the document; a file that cannot be read changes nothing. */
export async function openFile(file: File): Promise<void> {
  if (file.size > LARGEST_FILE_BYTES) {
    notice.value = {
      tone: 'trouble',
      text: `${file.name} has ${String(Math.round(file.size / 1048576))} MB; files of up to 64 MB are read.`,
    };
    return;
  }
  try {
    const bytes = new Uint8Array(await file.arrayBuffer());
    const opened = await withWorkbench(async (bench): Promise<Opened> => bench.open_file(bytes, file.name));
    switch (opened.outcome) {
      case 'document':
        openDocument(opened.document, `${file.name} is open.`);
        break;
      case 'matrix':
        openDocument({ ...EMPTY_DOCUMENT, title: titleFrom(file.name), matrix: opened.text }, `${file.name} is open.`);
        break;
      case 'refused':
        notice.value = { tone: 'trouble', text: `${file.name}: ${opened.reason}` };
        break;
    }
  } catch (reason) {
    reportTrouble(reason);
  }
}

function titleFrom(name: string): string {
  return name.replace(/\.[^.]*$/, '').replace(/[_-]+/g, ' ');
}

/** Hands a file to the person. */
export function saveFile(name: string, type: string, content: string | Uint8Array<ArrayBuffer>): void {
  const url = URL.createObjectURL(new Blob([content], { type }));
  const anchor = document.createElement('a');
  anchor.href = url;
  anchor.download = name;
  anchor.click();
  setTimeout(() => { URL.revokeObjectURL(url); }, 60_000);
}

/** A file name made from a title: letters, digits and hyphens. */
export function fileName(title: string, extension: string): string {
  const stem = title
    .normalize('NFKD')
    .replace(/[^\p{L}\p{N}]+/gu, '-')
    .replace(/^-+|-+$/g, '')
    .toLowerCase()
    .slice(0, 60);
  return `${stem || 'problem'}.${extension}`;
}

/** Copies text, with the older way where the newer is closed to the page. */
export async function copyText(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    const area = document.createElement('textarea');
    area.value = text;
    area.className = 'unseen';
    document.body.append(area);
    area.select();
    const copied = document.execCommand('copy');
    area.remove();
    return copied;
  }
}
