import { createContext, useCallback, useContext, useEffect, useMemo, useState, type ReactNode } from 'react';
import { X } from 'lucide-react';

interface ToastContent {
  text: ReactNode;
  /** Toasts are only for what can be undone, or has no place of its own. */
  undo?: { label: string; onUndo: () => void };
}
interface ShownToast extends ToastContent {
  id: number;
}

const SHOWN_MS = 10_000;
const ToastContext = createContext<(content: ToastContent) => void>(() => undefined);

export const useToast = () => useContext(ToastContext);

export function ToastProvider({ children }: { children: ReactNode }) {
  const [toast, setToast] = useState<ShownToast | null>(null);
  const show = useCallback(
    (content: ToastContent) => setToast((last) => ({ ...content, id: (last?.id ?? 0) + 1 })),
    [],
  );
  useEffect(() => {
    if (!toast) return;
    const timer = setTimeout(() => setToast(null), SHOWN_MS);
    return () => clearTimeout(timer);
  }, [toast]);
  const value = useMemo(() => show, [show]);
  return (
    <ToastContext value={value}>
      {children}
      <div
        role="status"
        className="pointer-events-none fixed inset-x-3.5 bottom-26 z-40 flex justify-center rail:bottom-12"
        data-print="hide"
      >
        {toast && (
          <div className="pointer-events-auto flex items-center gap-3 rounded-2 bg-rail py-2 pr-2 pl-4 text-14 text-rail-text shadow-3">
            <span>{toast.text}</span>
            {toast.undo && (
              <button
                type="button"
                className="rounded-1 px-2 py-1 font-bold text-rail-mark hover:bg-rail-2"
                onClick={() => {
                  toast.undo?.onUndo();
                  setToast(null);
                }}
              >
                {toast.undo.label}
              </button>
            )}
            <button
              type="button"
              aria-label="Dismiss"
              className="grid size-7 place-items-center rounded-1 text-rail-text-2 hover:bg-rail-2"
              onClick={() => setToast(null)}
            >
              <X size={16} aria-hidden />
            </button>
          </div>
        )}
      </div>
    </ToastContext>
  );
}
