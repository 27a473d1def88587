import { useId, useState } from 'react';
import type { SiteDto, StudyDto } from '#schemas/api/studies.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { TextField } from '#frontend/components/fields.tsx';
import { useStudyActs } from '../api/studies.ts';
import { useRefusals } from '#frontend/lib/use-refusals.ts';

const zones = Intl.supportedValuesOf('timeZone');

/** The zone of a site's clock; its name is completed from the list. */
function ZoneField(props: {
  value: string;
  onChange: (zone: string) => void;
  error?: string | undefined;
  help: string;
}) {
  const list = useId();
  return (
    <>
      <TextField
        label="Time zone"
        help={props.help}
        required
        list={list}
        autoComplete="off"
        spellCheck={false}
        value={props.value}
        onChange={(event) => props.onChange(event.target.value)}
        error={props.error}
      />
      <datalist id={list}>
        {zones.map((zone) => (
          <option key={zone} value={zone} />
        ))}
      </datalist>
    </>
  );
}

/** Adds a site to a study. */
export function AddSiteDialog({ study, onClose }: { study: StudyDto; onClose: () => void }) {
  const { addSite } = useStudyActs();
  const [code, setCode] = useState('');
  const [name, setName] = useState('');
  const [timeZone, setTimeZone] = useState('');
  const [refused, run] = useRefusals();
  return (
    <ActDialog
      title={`A site for ${study.name}`}
      act="Add the site"
      reasons={false}
      consequences={
        <p>Participants’ codes begin with the site’s two letters. The letters cannot be changed later.</p>
      }
      onAct={() => run(() => addSite(study.id, { code, name: name.trim(), timeZone: timeZone.trim() }))}
      onClose={onClose}
    >
      <TextField
        label="Code"
        help="Two capital letters."
        required
        maxLength={2}
        autoComplete="off"
        value={code}
        onChange={(event) => setCode(event.target.value.toUpperCase())}
        error={refused['/code']}
      />
      <TextField
        label="Name"
        required
        maxLength={80}
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={refused['/name']}
      />
      <ZoneField
        help="Its name in the zone data, such as America/La_Paz. Fixed once the study runs."
        value={timeZone}
        onChange={setTimeZone}
        error={refused['/timeZone']}
      />
    </ActDialog>
  );
}

/** Another name for a site, and before the study runs another zone. */
export function ChangeSiteDialog({
  study,
  site,
  onClose,
}: {
  study: StudyDto;
  site: SiteDto;
  onClose: () => void;
}) {
  const { changeSite } = useStudyActs();
  const [name, setName] = useState(site.name);
  const [timeZone, setTimeZone] = useState(site.timeZone);
  const [refused, run] = useRefusals();
  return (
    <ActDialog
      title={`Change site ${site.code}`}
      act="Change the site"
      consequences={
        <p>
          The protocol names sites by their names: publish an amendment after a change of name. A time zone
          can change only while the study is being set up, because times are taken in it.
        </p>
      }
      onAct={({ reason }) =>
        run(() => changeSite(site, { name: name.trim(), timeZone: timeZone.trim(), reason }))
      }
      onClose={onClose}
    >
      <TextField
        label="Name"
        required
        maxLength={80}
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={refused['/name']}
      />
      {study.state === 'setting-up' && (
        <ZoneField
          help="Its name in the zone data, such as America/La_Paz."
          value={timeZone}
          onChange={setTimeZone}
          error={refused['/timeZone']}
        />
      )}
    </ActDialog>
  );
}
