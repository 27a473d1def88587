import { useState } from 'react';
import type { PlanDto } from '#schemas/api/analysis.ts';
import { Button } from '../../../components/button.tsx';
import { Card, PageHead } from '../../../components/card.tsx';
import { CodeEditor } from '../../../components/code-editor/code-editor.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { TextField } from '../../../components/fields.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { ApiProblem } from '../../../lib/api.ts';
import { say } from '../../../lib/notices.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useRefusals } from '../../../lib/use-refusals.ts';
import { useSavePlan } from '../api/analysis.ts';
import { PlanDocument } from './plan-document.tsx';
import { PlanSignDialog } from './plan-sign-dialog.tsx';
import { PlanVersions } from './plan-versions.tsx';

const textOf = (content: unknown): string => JSON.stringify(content, null, 2);

/** The content of a text, or null while it is no JSON object. */
function contentOf(text: string): object | null {
  try {
    const value: unknown = JSON.parse(text);
    return typeof value === 'object' && value !== null && !Array.isArray(value) ? value : null;
  } catch {
    return null;
  }
}

interface PlanEditorProps {
  study: string;
  plan: PlanDto;
  onReload: () => Promise<unknown>;
}

/** A plan being written: the document that it reads as, beside its text. */
export function PlanEditor({ study, plan, onReload }: PlanEditorProps) {
  const may = useMay();
  const save = useSavePlan(study);
  const [refused, run] = useRefusals();
  const [name, setName] = useState(plan.name);
  const [text, setText] = useState(() => textOf(plan.content));
  // What was loaded or saved last; a later revision of someone else is never overwritten unseen.
  const [seen, setSeen] = useState(plan);
  const [signing, setSigning] = useState(false);
  const content = contentOf(text);
  const [lastRead, setLastRead] = useState<unknown>(plan.content);
  const changed = name !== seen.name || text !== textOf(seen.content);
  const mayWrite = may('update', 'PlanDraft');
  const stale = save.error instanceof ApiProblem && save.error.status === 412;

  const handleText = (next: string): void => {
    setText(next);
    const read = contentOf(next);
    if (read !== null) setLastRead(read);
  };
  const handleSave = async (): Promise<void> => {
    if (content === null) return;
    const { id, revision } = seen;
    const { data } = await run(() => save.mutateAsync({ id, revision, name: name.trim(), content }));
    setSeen(data);
    setName(data.name);
    say(`Saved, revision ${data.revision}`);
  };
  return (
    <>
      <PageHead
        title={seen.name}
        note={`revision ${seen.revision}, by ${seen.author}`}
        actions={
          <>
            {mayWrite && (
              <Button
                busy={save.isPending}
                disabled={!changed || content === null || name.trim() === ''}
                // What is refused stands in the summary below.
                onClick={() => void handleSave().catch(() => undefined)}
              >
                Save
              </Button>
            )}
            {may('sign', 'PlanDraft') && (
              <Button
                variant="primary"
                disabled={changed || seen.problems.length > 0}
                onClick={() => setSigning(true)}
              >
                Sign the plan
              </Button>
            )}
          </>
        }
      />
      <div className="mb-3 flex flex-col gap-2">
        {save.error !== null && <ErrorSummary error={save.error} />}
        {stale && (
          <div className="flex flex-wrap items-center gap-3 text-sm">
            <span>Copy what you want to keep; then load the newer revision in its place.</span>
            <Button onClick={() => void onReload()}>Load the newer revision</Button>
          </div>
        )}
        <PlanState unreadable={content === null} changed={changed} openPoints={seen.problems.length} />
      </div>
      <div className="grid items-start gap-4 xl:grid-cols-2">
        <div className="flex min-w-0 flex-col gap-4">
          <Card title="The plan" note={content === null ? 'as last readable' : undefined}>
            <PlanDocument content={content ?? lastRead} />
          </Card>
          <PlanVersions study={study} versions={plan.versions} />
        </div>
        <Card title="Its text" note="JSON">
          <div className="flex flex-col gap-3">
            <TextField
              label="Name"
              required
              maxLength={120}
              readOnly={!mayWrite}
              value={name}
              error={refused['/name']}
              onChange={(event) => setName(event.target.value)}
            />
            <CodeEditor
              label="Text of the plan"
              value={text}
              onChange={handleText}
              readOnly={!mayWrite}
              check={() => Promise.resolve(seen.problems)}
            />
            {seen.problems.length > 0 && (
              <section aria-labelledby="plan-points">
                <h3 id="plan-points" className="text-sm font-semibold">
                  Before it can be signed{changed ? ', as last saved' : ''}
                </h3>
                <ul className="list-disc pl-6 text-sm">
                  {seen.problems.map(({ pointer, message }) => (
                    <li key={pointer + message}>
                      <span className="font-mono text-xs">{pointer === '' ? '/' : pointer}</span> {message}
                    </li>
                  ))}
                </ul>
              </section>
            )}
          </div>
        </Card>
      </div>
      {signing && (
        <PlanSignDialog
          study={study}
          plan={{ ...seen, versions: plan.versions }}
          onClose={() => setSigning(false)}
        />
      )}
    </>
  );
}

interface PlanStateProps {
  unreadable: boolean;
  changed: boolean;
  openPoints: number;
}

function PlanState({ unreadable, changed, openPoints }: PlanStateProps) {
  if (unreadable) return <StateMark state="asks" word="the text is no JSON object yet; it is not saved" />;
  if (changed) return <StateMark state="underway" word="changed; save it to have it checked" />;
  if (openPoints === 0) return <StateMark state="settled" word="saved; can be signed" />;
  return (
    <StateMark
      state="asks"
      word={openPoints === 1 ? 'saved; 1 open point' : `saved; ${openPoints} open points`}
    />
  );
}
