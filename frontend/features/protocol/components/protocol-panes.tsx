import type { ProtocolVersionDto, ShownProtocol } from '#schemas/api/protocol.ts';
import type { Pane } from '#frontend/components/pane-tabs.tsx';
import { MeasureTable } from './measure-table.tsx';
import { ProtocolOverview } from './protocol-overview.tsx';
import { RunSheetTimeline } from './run-sheet-timeline.tsx';

interface Shown {
  studyCode: string;
  content: ShownProtocol;
  instruments: ProtocolVersionDto['instruments'];
}

/** The readable parts of a protocol, published or drafted. */
export const protocolPanes = ({ studyCode, content, instruments }: Shown): Pane[] => [
  { key: 'overview', label: 'Overview', content: <ProtocolOverview content={content} /> },
  {
    key: 'run-sheets',
    label: 'Run sheets',
    content: content.visitTypes.map((visitType) => (
      <RunSheetTimeline
        key={visitType.key}
        visitType={visitType}
        instruments={instruments}
        instrumentPath={`/studies/${studyCode}/instruments`}
      />
    )),
  },
  { key: 'measures', label: 'Measures', content: <MeasureTable content={content} /> },
];
