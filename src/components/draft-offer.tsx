import { Button } from './button';
import { Notice } from './status-word';
import { Time } from './time';

/** Offers an edit that was never saved: after an ended session, a closed tab, a crash. */
export function DraftOffer({
  savedAt,
  what,
  onTake,
  onDecline,
}: {
  savedAt: string;
  what: string;
  onTake: () => void;
  onDecline: () => void;
}) {
  return (
    <Notice tone="weld" title={`Unsaved ${what}`} className="mb-4">
      <p>
        You edited this on <Time iso={savedAt} /> and did not save. The edit was kept in this browser.
      </p>
      <div className="mt-2 flex gap-2">
        <Button size="small" variant="primary" onClick={onTake}>
          Continue with it
        </Button>
        <Button size="small" onClick={onDecline}>
          Discard it
        </Button>
      </div>
    </Notice>
  );
}
