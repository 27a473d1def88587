import { useQuery } from '@tanstack/react-query';
import type { EntryDto, HistoryLineDto } from '#schemas/api/capture.ts';
import { parseAddress } from '#schemas/instruments/address.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { Dialog } from '../../../components/dialog.tsx';
import { HiddenValue } from '../../../components/pen-mark.tsx';
import { Quantity } from '../../../components/quantity.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { historyQuery } from '../api/entries.ts';

interface HistoryDialogProps {
  study: string;
  entry: EntryDto;
  compiled: CompiledInstrument;
  zone: string;
  onClose: () => void;
}

/** Every change of an entry, old values legible, with who, when and why. */
export function HistoryDialog({ study, entry, compiled, zone, onClose }: HistoryDialogProps) {
  const query = useQuery(historyQuery(study, entry.id, entry.revision));
  const label = (line: HistoryLineDto): string => {
    const address = parseAddress(line.address);
    const field = compiled.field(address?.pointer ?? '')?.label ?? line.address;
    return address?.reading === undefined ? field : `${field}, reading ${address.reading + 1}`;
  };
  const columns: Column<HistoryLineDto>[] = [
    {
      header: 'When',
      cell: (line) => <time dateTime={line.at}>{formatMoment(line.at, zone, { seconds: true })}</time>,
    },
    {
      header: 'Who',
      cell: (line) => (line.derivation ? line.actor : `${line.actor}, ${line.role.replaceAll('-', ' ')}`),
    },
    { header: 'Field', cell: label },
    { header: 'Value', cell: (line) => <Value line={line} /> },
    { header: 'Why', cell: why },
    { header: 'No.', numeric: true, cell: (line) => line.sequence, optional: true },
  ];
  return (
    <Dialog title={`History of ${compiled.title}`} onClose={onClose} wide>
      <DataTable
        caption="Changes, oldest first"
        captionHidden
        name="entry-history"
        columns={columns}
        query={query}
        rowKey={(line) => `${line.sequence}${line.address}${line.at}`}
        empty={{ title: 'Nothing has been entered yet' }}
      />
    </Dialog>
  );
}

function Value({ line }: { line: HistoryLineDto }) {
  const { value } = line;
  if ('hidden' in value) return <HiddenValue />;
  if ('redacted' in value) return <em>redacted</em>;
  if (value.missing !== undefined) return <>missing: {value.missing}</>;
  if (value.value === undefined) return <em>taken away</em>;
  const written = value.written ?? String(value.value);
  return (
    <Quantity
      written={line.outcome?.outcome === 'refused' ? `${written} (not stored)` : written}
      unit={value.unit}
    />
  );
}

function why(line: HistoryLineDto): string {
  const { outcome, reason, derivation } = line;
  if (outcome !== null)
    return `check ${outcome.checkId}: ${outcome.outcome}${outcome.reason ? `, ${outcome.reason}` : ''}`;
  if (derivation !== null) return `${derivation.rule}, version ${derivation.version}`;
  return reason ?? '';
}
