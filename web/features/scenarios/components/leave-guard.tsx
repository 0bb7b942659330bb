import { useEffect } from 'react';
import { useBlocker } from 'react-router-dom';
import { Button } from '../../../ui/button.tsx';
import { Dialog } from '../../../ui/dialog.tsx';

/** Asks before unsaved changes are left behind, inside the app and when the window closes. */
export function LeaveGuard({ when, what }: { when: boolean; what: string }) {
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) => when && currentLocation.pathname !== nextLocation.pathname,
  );
  useEffect(() => {
    if (!when) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    addEventListener('beforeunload', ask);
    return () => removeEventListener('beforeunload', ask);
  }, [when]);
  return (
    <Dialog
      open={blocker.state === 'blocked'}
      onClose={() => blocker.reset?.()}
      title="Leave without saving?"
      actions={
        <>
          <Button onClick={() => blocker.proceed?.()}>Leave, lose the changes</Button>
          <Button variant="filled" onClick={() => blocker.reset?.()}>
            Stay and keep editing
          </Button>
        </>
      }
    >
      <p>The changes to {what} aren’t saved yet. Leaving drops them.</p>
    </Dialog>
  );
}
