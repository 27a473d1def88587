import type { ReactNode } from 'react';
import { Caution } from '../components/caution.tsx';
import { Card, PageHead } from '../components/card.tsx';
import { Key } from '../components/button.tsx';
import { StateMark, type PenState } from '../components/pen-mark.tsx';
import { usePageTitle } from '../lib/use-page-title.ts';

const marks: [PenState, string, string][] = [
  ['todo', 'flat line', 'to do: nothing has been done yet'],
  ['underway', 'rising line', 'under way: begun, not finished'],
  ['settled', 'rise and level', 'settled: complete, verified, signed or closed'],
  ['asks', 'spike', 'asks for you: someone must decide or answer'],
  ['late', 'broken line', 'missed or late, or no longer covering what it covered'],
  ['hidden', 'dotted line', 'there, but hidden from your role until unblinding'],
];

const words: [string, string][] = [
  ['drafting table', 'where instruments are made and published as versions'],
  ['run sheet', 'the timed steps of a visit, and the form of each'],
  ['hold point', 'a step that waits until a condition holds'],
  ['visit ribbon', 'all participants on an axis of study days'],
  ['entry', 'one instrument filled in at one step'],
  ['verification desk', 'source on one side, values on the other'],
  ['cut', 'a frozen snapshot of the data, with its hash'],
  ['plan', 'what is to be computed, signed before the lock'],
  ['run', 'a plan carried out on a cut; repeated, it gives the same bytes'],
  ['split', 'a change of resistance as viscosity part and tone part'],
];

/** What the marks and words mean, the keys, and what the product is not for. */
export function HelpPage() {
  usePageTitle('Help');
  return (
    <>
      <PageHead title="Help" />
      <div className="grid items-start gap-4 lg:grid-cols-2">
        <Card title="Pen marks">
          <List
            items={marks.map(([state, word, meaning]) => [
              <StateMark key={state} state={state} word={word} />,
              meaning,
            ])}
          />
        </Card>
        <Card title="Words of our own">
          <List items={words} />
        </Card>
        <Card title="Keys">
          <p>
            <Key>?</Key> lists the keys of the page you are on, <Key>/</Key> goes to the search by participant
            code, <Key>g</Key> and a letter goes to a tab. In a grid of readings <Key>Tab</Key>,{' '}
            <Key>Enter</Key> and the arrow keys move, a column can be pasted, and <Key>x</Key> marks a reading
            unusable with a reason.
          </p>
        </Card>
        <Card title="When the network is away">
          <p>
            Go on working. What you type is kept on the device, sealed for you alone, and sent when the
            network is back; the line at the bottom of a form says what the server has and what only the
            device has. Signing out wipes the device.
          </p>
        </Card>
        <Card title="What the numbers are for">
          <Caution>
            For research under an approved protocol. Not for diagnosis, treatment or monitoring of patients.
            Derived values rest on published models with stated ranges. Procedures that can hurt follow the
            protocol, local policy and licensed practice.
          </Caution>
        </Card>
      </div>
    </>
  );
}

function List({ items }: { items: readonly (readonly [ReactNode, string])[] }) {
  return (
    <dl className="grid grid-cols-[max-content_1fr] gap-x-4 gap-y-2">
      {items.map(([term, meaning]) => (
        <div key={meaning} className="contents">
          <dt className="font-medium text-soot">{term}</dt>
          <dd className="text-ink-soft">{meaning}</dd>
        </div>
      ))}
    </dl>
  );
}
