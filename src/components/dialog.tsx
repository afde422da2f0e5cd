import { Dialog as Radix } from 'radix-ui';
import { X } from 'lucide-react';
import { useRef, type ReactNode } from 'react';

interface PanelProps {
  title: string;
  isOpen: boolean;
  onClose: () => void;
  children: ReactNode;
}

/** A panel over the page: focus stays inside, Esc closes it, focus goes back to where it was. */
export function Panel({ title, isOpen, onClose, children }: PanelProps) {
  const opener = useRef<HTMLElement | null>(null);
  return (
    <Radix.Root open={isOpen} onOpenChange={(open) => !open && onClose()}>
      <Radix.Portal>
        <Radix.Overlay className="fixed inset-0 bg-ink/40 z-40 no-print" />
        <Radix.Content
          aria-describedby={undefined}
          onOpenAutoFocus={() => {
            opener.current = document.activeElement as HTMLElement | null;
          }}
          onCloseAutoFocus={(event) => {
            event.preventDefault();
            opener.current?.focus();
          }}
          className="fixed z-50 inset-y-0 right-0 w-full max-w-[600px] bg-surface border-l border-edge overflow-y-auto p-5 sm:p-6"
        >
          <div className="flex items-start gap-4 mb-4">
            <Radix.Title className="text-lg font-semibold">{title}</Radix.Title>
            <Radix.Close className="btn btn-second ml-auto gap-2">
              <X aria-hidden size={18} /> Close
            </Radix.Close>
          </div>
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
