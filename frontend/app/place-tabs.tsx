import { useNavigate } from 'react-router-dom';
import { TabRow } from '../components/tab-row.tsx';
import { useShortcut } from '../lib/keyboard/use-shortcut.ts';
import { useMay } from '../lib/session/ability.ts';
import { useSession } from '../lib/session/session.ts';
import { administrationTabs, studyTabs, type Tab } from './tabs.ts';

/** The row of tabs of the study or of the administration, those the role can use, and their keys. */
export function PlaceTabs() {
  const { acting } = useSession();
  const may = useMay();
  if (!acting) return null;
  const { studyCode } = acting;
  const base = studyCode === null ? '/administration' : `/studies/${studyCode}`;
  const tabs = studyCode === null ? administrationTabs : studyTabs;
  const open = tabs.filter(({ ability }) => ability === null || may(...ability));
  const links = open.map(({ label, path }) => ({ label, to: `${base}/${path}` }));
  return (
    <>
      <TabRow label={studyCode ?? 'Administration'} tabs={[...links, { label: 'Help', to: '/help' }]} />
      {open.map((tab) => (
        <TabKey key={tab.path} tab={tab} base={base} />
      ))}
    </>
  );
}

function TabKey({ tab: { label, path, key }, base }: { tab: Tab; base: string }) {
  const navigate = useNavigate();
  const shortcut = { id: `go-${path}`, keys: `g ${key}`, label: `Go to ${label}`, group: 'Go' };
  useShortcut(shortcut, () => void navigate(`${base}/${path}`));
  return null;
}
