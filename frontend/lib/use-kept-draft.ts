import { useEffect, useEffectEvent, useRef, useState } from 'react';
import { ApiProblem } from './api.ts';

/** A draft as the server has it. */
export interface StoredDraft<Content> {
  content: Content;
  revision: number;
}

interface Ports<Content> {
  /** Sends the draft; answers with what is stored then. @throws ApiProblem 412 when somebody else changed it */
  send: (content: Content, revision: number) => Promise<StoredDraft<Content>>;
  /** Asks for the stored draft again. */
  load: () => Promise<StoredDraft<Content>>;
}

export interface KeptDraft<Content> {
  content: Content;
  change: (content: Content) => void;
  revision: number;
  /** Something typed is not stored yet. */
  unsaved: boolean;
  saving: boolean;
  /** When it was stored last, here. */
  savedAt: string | undefined;
  /** Why it could not be stored; tried again on the next change, or by `save`. */
  failure: unknown;
  /** What somebody else stored meanwhile; a person chooses. */
  theirs: StoredDraft<Content> | undefined;
  /** Stores what is typed; the revision then stored, or undefined when it could not be. */
  save: () => Promise<number | undefined>;
  /** Goes on from what the server has now, after an act of one's own or in place of one's own words. */
  adopt: (stored: StoredDraft<Content>) => void;
  /** Keeps one's own words over theirs. */
  overrule: () => void;
}

const pauseBeforeSaving = 4000;

/**
 * A draft that is typed here and stored by itself after a pause, on leaving the page, and at the press of a button.
 * What is typed is never cleared by an error.
 */
export function useKeptDraft<Content>(
  initial: StoredDraft<Content>,
  { send, load }: Ports<Content>,
): KeptDraft<Content> {
  const [stored, setStored] = useState(initial);
  const [content, setContent] = useState(initial.content);
  const [saving, setSaving] = useState(false);
  const [savedAt, setSavedAt] = useState<string>();
  const [failure, setFailure] = useState<unknown>();
  const [theirs, setTheirs] = useState<StoredDraft<Content>>();
  const unsaved = JSON.stringify(content) !== JSON.stringify(stored.content);

  const save = async (): Promise<number | undefined> => {
    if (!unsaved) return stored.revision;
    if (saving || theirs !== undefined) return undefined;
    setSaving(true);
    setFailure(undefined);
    try {
      const now = await send(content, stored.revision);
      setStored({ content, revision: now.revision });
      setSavedAt(new Date().toISOString());
      return now.revision;
    } catch (error) {
      if (error instanceof ApiProblem && error.status === 412) setTheirs(await load());
      else setFailure(error);
      return undefined;
    } finally {
      setSaving(false);
    }
  };

  const adopt = (next: StoredDraft<Content>): void => {
    setStored(next);
    setContent(next.content);
    setTheirs(undefined);
    setFailure(undefined);
  };

  const saveLater = useEffectEvent(() => void save());
  const waits = unsaved && !saving && failure === undefined && theirs === undefined;
  useEffect(() => {
    if (!waits) return;
    const timer = setTimeout(() => saveLater(), pauseBeforeSaving);
    return () => clearTimeout(timer);
  }, [waits, content]);

  // Leaving by a link stores what is typed; closing the window asks first.
  const last = useRef({ unsaved, save });
  useEffect(() => {
    last.current = { unsaved, save };
  });
  useEffect(() => {
    const warn = (event: BeforeUnloadEvent) => {
      if (last.current.unsaved) event.preventDefault();
    };
    addEventListener('beforeunload', warn);
    return () => {
      removeEventListener('beforeunload', warn);
      void last.current.save();
    };
  }, []);

  return {
    content,
    change: (next) => {
      setContent(next);
      setFailure(undefined);
    },
    revision: stored.revision,
    unsaved,
    saving,
    savedAt,
    failure,
    theirs,
    save,
    adopt,
    overrule: () => {
      if (theirs === undefined) return;
      setStored(theirs);
      setTheirs(undefined);
    },
  };
}
