/** Starts the page: what to open first, then the sheet that follows it. */
import './view/style/base.css';
import './view/style/sheet.css';
import './view/style/problem.css';
import './view/style/figures.css';
import './view/style/working.css';
import './view/style/spectrum.css';
import './view/style/eigenpairs.css';
import './view/style/proof.css';
import './view/style/claims.css';
import './view/style/print.css';

import { render } from 'preact';

import { openFirstExample } from './shared/examples';
import { followDrops } from './shared/drops';
import { followLinks, openLink } from './shared/link';
import { followDocument } from './shared/pipeline';
import { followSolutions } from './shared/proof';
import { keepDocument, lastProblem } from './shared/storage';
import { replaceDocument, reportTrouble, work } from './shared/store';
import { installOffline } from './shared/offline';
import { Shell } from './view/shell';

/** A link comes before the last problem, and that before the first example. */
async function openFirst(): Promise<void> {
  const last = await lastProblem();
  if (last !== null) replaceDocument(last);
  const linked = await openLink();
  if (!linked && last === null) await openFirstExample();
}

async function start(): Promise<void> {
  const place = document.getElementById('page');
  if (place === null) throw new Error('The page has no place for the sheet.');
  render(<Shell />, place);
  followDrops();
  followLinks();
  try {
    await openFirst();
  } catch (reason) {
    work.value = { state: 'failed', reason: String(reason) };
    reportTrouble(reason);
  }
  keepDocument();
  followDocument();
  followSolutions();
  installOffline();
}

void start();
