import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { LoadingState } from '../../../components/states';
import { Notice } from '../../../components/status-word';
import { StructureEditor } from '../../../components/structure/structure-editor';
import { errorMessage, issueFor } from '../../../lib/api-error';
import { explanationQuery } from '../api/explanation-query';
import { ExplanationAnswer } from './explanation-answer';

interface ExplainDialogProps {
  runId: string;
  /** SMILES asked about, from the address; empty = nothing asked yet. */
  asked: string;
  onAsk: (smiles: string) => void;
  onClose: () => void;
}

/** "Why is X not here?": draw or paste a structure, get the reason or its rank. */
export function ExplainDialog({ runId, asked, onAsk, onClose }: ExplainDialogProps) {
  const [smiles, setSmiles] = useState(asked);
  const { data, error, isFetching, refetch } = useQuery({ ...explanationQuery(runId, asked), enabled: asked !== '' });
  const trimmed = smiles.trim();
  const isAnswered = asked !== '' && trimmed === asked;
  const ask = () => {
    if (trimmed === asked) void refetch();
    else onAsk(trimmed);
  };
  return (
    <Dialog
      title="Why is X not here?"
      width="wide"
      onClose={onClose}
      footer={
        <>
          <Button onClick={onClose}>Close</Button>
          <Button variant="primary" disabled={trimmed === ''} isBusy={isFetching} onClick={ask}>
            Ask
          </Button>
        </>
      }
    >
      <div className="grid grid-cols-[minmax(0,1fr)] gap-6 desk:grid-cols-[minmax(0,1fr)_minmax(0,360px)]">
        <StructureEditor
          label="Structure"
          value={smiles}
          onValueChange={setSmiles}
          error={isAnswered && error !== null ? (issueFor(error, 'smiles') ?? undefined) : undefined}
        />
        <div aria-live="polite" className="min-w-0">
          {asked === '' ? (
            <p className="text-faded">
              Draw the structure you miss, or paste its SMILES, and ask. The answer names the stage that cut it and the atoms concerned, or
              its rank.
            </p>
          ) : !isAnswered ? (
            <p className="text-faded">The structure was changed. Ask again for its answer.</p>
          ) : error !== null ? (
            <Notice tone="madder" title="No answer">
              <p>
                {issueFor(error, 'smiles') === undefined
                  ? errorMessage(error)
                  : 'The structure cannot be looked up as it is; see the field below the drawing.'}
              </p>
            </Notice>
          ) : data === undefined ? (
            <LoadingState label="Looking it up" className="p-0" />
          ) : (
            <ExplanationAnswer explanation={data} />
          )}
        </div>
      </div>
    </Dialog>
  );
}
