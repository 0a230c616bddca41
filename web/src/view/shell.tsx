/** The sheet, its masthead and the foot line. */
import { signal } from '@preact/signals';
import { useEffect } from 'preact/hooks';

import { notice, outdated } from '../shared/store';
import { FootLine } from './foot';
import { sections, type SectionEntry } from './sections';

/** The section that the upper part of the window shows. */
const inView = signal<string>('problem');

/** Follows the section in view from now on; returns how to stop. */
function followSections(): () => void {
  // A band below the masthead: the section that crosses it is the one being read.
  const observer = new IntersectionObserver(
    (crossings) => {
      for (const { isIntersecting, target } of crossings) if (isIntersecting) inView.value = target.id;
    },
    { rootMargin: '-20% 0px -75% 0px' },
  );
  for (const { id } of sections) {
    const section = document.getElementById(id);
    if (section !== null) observer.observe(section);
  }
  return () => { observer.disconnect(); };
}

function Section({ entry }: { entry: SectionEntry }) {
  const stale = entry.derived && outdated.value;
  const Body = entry.component;
  return (
    <section id={entry.id} aria-labelledby={`${entry.id}-heading`} class={stale ? 'outdated' : ''} aria-busy={stale}>
      <div class="section-heading">
        <h2 id={`${entry.id}-heading`} tabIndex={-1}>{entry.heading}</h2>
        {stale && <span class="soft">of the text before the last change</span>}
      </div>
      <div class="section-body">
        <Body />
      </div>
    </section>
  );
}

function Notice() {
  const current = notice.value;
  return (
    <div role="status" aria-live="polite" class="notice-place">
      {current !== null && (
        <div class={`notice ${current.tone === 'trouble' ? 'warn' : ''}`}>
          <span>{current.text}</span>
          {current.action && (
            <button type="button" class="quiet" onClick={current.action.run}>
              {current.action.label}
            </button>
          )}
          <button type="button" class="quiet" onClick={() => { notice.value = null; }}>
            Dismiss
          </button>
        </div>
      )}
    </div>
  );
}

export function Shell() {
  useEffect(followSections, []);
  return (
    <>
      <header class="masthead">
        <h1>
          <a class="name" href="#problem" onClick={goTo('problem')}>
            Eigenledger
          </a>
        </h1>
        <nav aria-label="Sections">
          <ul>
            {sections.map(({ id, heading }) => (
              <li key={id}>
                <a
                  href={`#${id}`}
                  aria-current={inView.value === id ? 'true' : undefined}
                  onClick={goTo(id)}
                >
                  {heading}
                </a>
              </li>
            ))}
          </ul>
        </nav>
      </header>
      <Notice />
      <main class="sheet">
        {sections.map((entry) => (
          <Section key={entry.id} entry={entry} />
        ))}
      </main>
      <FootLine />
    </>
  );
}

/** The fragment belongs to the problem's link, so a jump must not write to it. */
function goTo(id: string) {
  return (event: Event) => {
    event.preventDefault();
    document.getElementById(id)?.scrollIntoView();
    document.getElementById(`${id}-heading`)?.focus();
  };
}
