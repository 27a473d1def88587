import { useId } from 'react';
import { limitedToSites, type Role } from '#schemas/vocabulary/roles.ts';
import { CheckboxField } from '#frontend/components/fields.tsx';
import { FieldError } from '#frontend/components/field.tsx';

interface SitesFieldProps {
  role: Role;
  sites: readonly { id: string; code: string; name: string }[];
  /** Null means all sites. */
  siteIds: string[] | null;
  onChange: (siteIds: string[] | null) => void;
  error?: string | undefined;
}

/** The sites a role works at; only some roles can be limited. */
export function SitesField({ role, sites, siteIds, onChange, error }: SitesFieldProps) {
  const id = useId();
  if (!limitedToSites.includes(role))
    return <p className="text-sm">This role works at all sites of the study.</p>;
  const toggle = (siteId: string) => {
    const chosen = siteIds ?? [];
    onChange(chosen.includes(siteId) ? chosen.filter((other) => other !== siteId) : [...chosen, siteId]);
  };
  return (
    <fieldset className="flex flex-col gap-1.5" aria-describedby={error ? `${id}-error` : undefined}>
      <legend className="mb-1 text-sm font-medium">Sites</legend>
      <CheckboxField
        label="all sites, those added later too"
        checked={siteIds === null}
        onChange={(event) => onChange(event.target.checked ? null : [])}
      />
      {siteIds !== null &&
        sites.map((site) => (
          <CheckboxField
            key={site.id}
            label={`${site.code} · ${site.name}`}
            checked={siteIds.includes(site.id)}
            onChange={() => toggle(site.id)}
          />
        ))}
      {error && <FieldError id={`${id}-error`}>{error}</FieldError>}
    </fieldset>
  );
}
