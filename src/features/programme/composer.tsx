import { Redo2, Undo2 } from 'lucide-react';
import { useEffect, useMemo, useRef, useState } from 'react';
import type { Draft } from '@shared/features/programme/programme.contract';
import { countChanges } from '@shared/features/programme/programme.rules';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { Segmented } from '@/components/field';
import { KindTag } from '@/components/kind-tag';
import { PageBar } from '@/components/page-bar';
import { weeksOf } from './calendar-columns';
import { ChangesDialog } from './changes-dialog';
import { ClashList, type Target } from './clash-list';
import { lensKey, talkKeys, undoKeys } from './composer-keys';
import { StatusLine } from './drag-hint';
import { Inspector } from './inspector';
import { ListView } from './list-view';
import { MoveDialog } from './move-dialog';
import { OverviewCalendar } from './overview-calendar';
import { PublishDialog } from './publish-dialog';
import { Tray } from './tray';
import { useComposer, type Composer as Shared } from './use-composer';
import { WeekCalendar } from './week-calendar';

type View = 'week' | 'whole' | 'list';

/** Tray left, calendar in the middle, the chosen talk and the clashes right. */
export function Composer({ draft }: { draft: Draft }) {
  const composer = useComposer(draft.event.slug, draft);
  const weeks = useWeeks(composer);
  const narrow = useNarrow();
  const [wanted, setView] = useState<View>('week');
  const [dialog, setDialog] = useState<'changes' | 'publish' | null>(null);
  const [target, setTarget] = useState<Target>(null);
  const work = useRef<HTMLDivElement>(null);
  const view: View = narrow ? 'list' : wanted;
  useUndoKeys(composer);
  useFocusKept(work, composer);

  return (
    <div className="flex min-h-0 grow flex-col lg:h-[calc(100dvh-96px)] lg:flex-none">
      <PageBar
        title="Programme"
        controls={<Controls composer={composer} weeks={weeks} view={view} onView={setView} narrow={narrow} />}
        actions={<Publishing composer={composer} onOpen={setDialog} />}
      />
      <p className="sr-only" role="status" aria-live="polite">
        {composer.said}
      </p>
      <div
        ref={work}
        onKeyDown={(event) => lensKey(event, weeks.days, weeks.moveLens) || talkKeys(event, composer)}
        className={
          narrow
            ? 'flex flex-col'
            : 'grid min-h-0 grow grid-cols-[204px_minmax(0,1fr)_332px] max-lg:grid-cols-[180px_minmax(0,1fr)]'
        }
      >
        {!narrow && <Tray composer={composer} />}
        <div className="flex min-h-0 min-w-0 flex-col max-lg:h-[720px] max-sm:h-auto">
          <div className="min-h-0 grow">
            {view === 'week' && (
              <WeekCalendar
                composer={composer}
                days={weeks.days}
                lens={weeks.lens}
                onLens={weeks.moveLens}
                target={target}
              />
            )}
            {view === 'whole' && <OverviewCalendar composer={composer} days={weeks.all} />}
            {view === 'list' && (
              <div className="h-full overflow-y-auto">
                <ListView composer={composer} withTray={narrow} />
              </div>
            )}
          </div>
          {view !== 'list' && <StatusLine said={composer.said} />}
        </div>
        <aside className="min-h-0 overflow-y-auto border-l border-rule max-lg:col-span-2 max-lg:border-t max-lg:border-l-0">
          <Inspector composer={composer} />
          <ClashList composer={composer} onTarget={setTarget} />
        </aside>
      </div>
      <MoveDialog composer={composer} />
      {dialog === 'changes' && <ChangesDialog draft={draft} onClose={() => setDialog(null)} />}
      {dialog === 'publish' && <PublishDialog composer={composer} onClose={() => setDialog(null)} />}
    </div>
  );
}

interface Weeks {
  all: number[][];
  index: number;
  days: number[];
  lens: number;
  show(index: number): void;
  moveLens(day: number): void;
}

/** The weeks of the event and the lens day in the one that is shown: the chosen talk's day comes into view. */
function useWeeks({ problem, laid, at, chosen }: Shared): Weeks {
  const all = useMemo(
    () =>
      weeksOf(problem, new Set([...problem.blocks.map((block) => block.day), ...laid.map((one) => one.day)])),
    [problem, laid],
  );
  const [lens, setLens] = useState(all[0]?.[0] ?? 0);
  const chosenDay = chosen === null ? undefined : at.get(chosen)?.day;
  const [seen, setSeen] = useState(chosenDay);
  const index = Math.max(
    0,
    all.findIndex((days) => days.includes(lens)),
  );
  if (chosenDay !== seen) {
    setSeen(chosenDay);
    if (chosenDay !== undefined && !all[index]?.includes(chosenDay)) setLens(chosenDay);
  }
  return {
    all,
    index,
    days: all[index] ?? [0],
    lens,
    show: (next) => setLens(all[next]?.[0] ?? 0),
    moveLens: setLens,
  };
}

interface ControlsProps {
  composer: Shared;
  weeks: Weeks;
  view: View;
  onView: (view: View) => void;
  narrow: boolean;
}

function Controls({ composer, weeks, view, onView, narrow }: ControlsProps) {
  const kinds = [...new Map(composer.draft.cards.map((card) => [card.kind, card.kind])).values()];
  return (
    <>
      {weeks.all.length > 1 && view === 'week' && (
        <Segmented
          label="Week"
          options={weeks.all.map((_, i) => ({ value: String(i), label: `Week ${i + 1}` }))}
          value={String(weeks.index)}
          onChange={(value) => weeks.show(Number(value))}
        />
      )}
      {!narrow && (
        <Segmented
          label="View"
          options={[
            { value: 'week', label: 'Week' },
            { value: 'whole', label: 'Whole event' },
            { value: 'list', label: 'List' },
          ]}
          value={view}
          onChange={onView}
        />
      )}
      {composer.draft.can.change && (
        <span className="flex gap-1">
          <Button
            aria-label={composer.canUndo ? `Take back: ${composer.canUndo}` : 'Take back'}
            title="Take back (Ctrl+Z)"
            disabled={!composer.canUndo}
            onClick={composer.undo}
            className="px-2"
          >
            <Undo2 size={14} />
          </Button>
          <Button
            aria-label={composer.canRedo ? `Do again: ${composer.canRedo}` : 'Do again'}
            title="Do again (Ctrl+Shift+Z)"
            disabled={!composer.canRedo}
            onClick={composer.redo}
            className="px-2"
          >
            <Redo2 size={14} />
          </Button>
        </span>
      )}
      <span className="flex gap-3 text-dense text-ink2 max-2xl:hidden" aria-hidden="true">
        {kinds.map((kind) => (
          <KindTag key={kind} kind={kind} />
        ))}
      </span>
    </>
  );
}

function Publishing({
  composer,
  onOpen,
}: {
  composer: Shared;
  onOpen: (dialog: 'changes' | 'publish') => void;
}) {
  const { draft, clashes, saving } = composer;
  const changes = countChanges(draft.revision?.placements ?? [], draft.placements);
  const number = (draft.revision?.number ?? 0) + 1;
  return (
    <>
      <p className="text-right text-dense leading-[15px] text-ink2 max-sm:text-left">
        <strong className="font-semibold text-ink">
          {saving ? 'Saving' : `Draft: ${count(changes, 'change')}`}
        </strong>
        {!saving && (draft.revision ? ` since revision ${draft.revision.number}` : ', never published')}
        <br />
        {clashes.length > 0
          ? `${count(clashes.length, 'clash', 'clashes')} would go public too`
          : 'No clashes'}
      </p>
      <Button onClick={() => onOpen('changes')}>See changes</Button>
      {draft.can.publish && (
        <Button
          variant="primary"
          disabled={changes === 0 && draft.revision !== null}
          onClick={() => onOpen('publish')}
        >
          Publish revision {number}…
        </Button>
      )}
    </>
  );
}

/** Undo and redo from everywhere on the page, but not behind a dialog. */
function useUndoKeys(composer: Shared): void {
  const latest = useRef(composer);
  useEffect(() => {
    latest.current = composer;
  });
  useEffect(() => {
    const onKey = (event: KeyboardEvent): void => {
      if (!document.querySelector('[role="dialog"]')) undoKeys(event, latest.current);
    };
    document.addEventListener('keydown', onKey);
    return () => document.removeEventListener('keydown', onKey);
  }, []);
}

/** A talk that moves is drawn anew elsewhere: the focus goes with it. */
function useFocusKept(work: React.RefObject<HTMLDivElement | null>, { laid, chosen, moving }: Shared): void {
  const hadFocus = useRef<string | null>(null);
  useEffect(() => {
    const note = (): void => {
      const talk = document.activeElement?.closest<HTMLElement>('[data-talk]')?.dataset.talk;
      if (talk) hadFocus.current = talk;
      else if (document.activeElement !== document.body) hadFocus.current = null;
    };
    document.addEventListener('focusin', note);
    return () => document.removeEventListener('focusin', note);
  }, []);
  useEffect(() => {
    if (moving || document.activeElement !== document.body) return;
    const talk = hadFocus.current ?? chosen;
    if (talk)
      work.current?.querySelector<HTMLElement>(`[data-talk="${talk}"]`)?.focus({ preventScroll: true });
  }, [laid, moving, chosen, work]);
}

function useNarrow(): boolean {
  const [narrow, setNarrow] = useState(() => matchMedia('(max-width: 760px)').matches);
  useEffect(() => {
    const query = matchMedia('(max-width: 760px)');
    const changed = (): void => setNarrow(query.matches);
    query.addEventListener('change', changed);
    return () => query.removeEventListener('change', changed);
  }, []);
  return narrow;
}
