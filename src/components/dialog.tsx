import { Dialog as Radix } from 'radix-ui';
import type { ReactNode, RefObject } from 'react';

/** Floats over the page: ink frame and shadow. Escape leaves; focus goes in and comes back. */
export function Dialog({
  open,
  onClose,
  title,
  aside,
  children,
  width = 540,
  focusFirst,
}: {
  open: boolean;
  onClose: () => void;
  title: ReactNode;
  aside?: ReactNode;
  children: ReactNode;
  width?: number;
  /** In a dialog that can do harm: the safe action. */
  focusFirst?: RefObject<HTMLElement | null>;
}) {
  return (
    <Radix.Root open={open} onOpenChange={(next) => !next && onClose()}>
      <Radix.Portal>
        <Radix.Overlay className="fixed inset-0 z-40 bg-paper/70" />
        <Radix.Content
          aria-describedby={undefined}
          onOpenAutoFocus={(event) => {
            if (!focusFirst?.current) return;
            event.preventDefault();
            focusFirst.current.focus();
          }}
          style={{ width: `min(${width}px, calc(100vw - 24px))` }}
          className="fixed top-1/2 left-1/2 z-50 max-h-[calc(100dvh-24px)] -translate-x-1/2 -translate-y-1/2 overflow-y-auto border-[1.75px] border-ink bg-sheet p-5 shadow-float"
        >
          <div className="mb-4 flex flex-wrap items-baseline gap-x-3">
            <Radix.Title className="font-serif text-[20px] leading-[26px]">{title}</Radix.Title>
            {aside && <span className="text-ink3">{aside}</span>}
          </div>
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
