import { useState } from 'react';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { paths } from '../../../app/paths';
import { Button, ButtonLink } from '../../../components/button';
import { DraftOffer } from '../../../components/draft-offer';
import { TextInput } from '../../../components/field';
import { Notice } from '../../../components/status-word';
import { ApiError, errorMessage } from '../../../lib/api-error';
import { showToast } from '../../../lib/toasts';
import type { UnknownDetail } from '../../../lib/unknown-queries';
import { useDraft } from '../../../lib/use-draft';
import { useSaveRevision, type Revision } from '../api/revisions';
import { draftOf, emptyDraft, issueAt, readDraft, type EvidenceDraft } from '../lib/evidence-draft';
import { BandsSection } from './bands-section';
import { CorrelationsSection } from './correlations-section';
import { FormulaSection } from './formula-section';
import { FragmentSection } from './fragment-section';
import { OptionsSection } from './options-section';
import { SignalsSection } from './signals-section';

interface Edit {
  draft: EvidenceDraft;
  comment: string;
}

/** The evidence form over one revision (null: nothing saved yet). Give it a key of the revision, so that a newer one starts afresh. */
export function EvidenceEditor({ unknown, revision }: { unknown: UnknownDetail; revision: Revision | null }) {
  const [saved] = useState(() => (revision === null ? emptyDraft() : draftOf(revision.evidence)));
  const [edit, setEdit] = useState<Edit>({ draft: saved, comment: '' });
  const [serverIssues, setServerIssues] = useState<readonly InputIssue[]>([]);
  const [hasTried, setHasTried] = useState(false);
  const save = useSaveRevision(unknown.id);
  const isReadOnly = !unknown.abilities.saveEvidence;
  const isChanged = JSON.stringify(edit.draft) !== JSON.stringify(saved);
  const base = String(revision?.number ?? 0);
  const kept = useDraft<Edit>(`evidence.3.${unknown.id}`, isChanged ? edit : null, base);

  const result = readDraft(edit.draft);
  // An empty formula is no mistake before the first attempt to save.
  const ownIssues = result.issues.filter((issue) => hasTried || !(issue.path === 'formula' && edit.draft.formula.trim() === ''));
  const issues = [...ownIssues, ...serverIssues];
  const change = (part: Partial<EvidenceDraft>) => {
    setServerIssues([]);
    setEdit((current) => ({ ...current, draft: { ...current.draft, ...part } }));
  };

  const submit = () => {
    setHasTried(true);
    if (!result.ok) {
      requestAnimationFrame(() => document.querySelector<HTMLElement>('main [aria-invalid="true"]')?.focus());
      return;
    }
    save.mutate(
      { evidence: result.document, comment: edit.comment.trim(), basedOn: revision?.number ?? 0 },
      {
        onSuccess: (created) => {
          kept.clear();
          showToast('done', `Revision ${created.number} saved.`);
        },
        onError: (error) => {
          if (error instanceof ApiError)
            setServerIssues(error.issues.map((issue) => ({ ...issue, path: issue.path.replace(/^evidence\./, '') })));
        },
      },
    );
  };

  const isConflict = save.error instanceof ApiError && save.error.code === 'revisionConflict';
  const unplaced = issues.filter((issue) => !isShownByAField(issue.path));
  return (
    <form
      className="space-y-4"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
      // Enter moves through the peak lists; only the button and Ctrl+Enter save.
      onKeyDown={(event) => {
        if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) submit();
        else if (event.key === 'Enter' && event.target instanceof HTMLInputElement) event.preventDefault();
      }}
    >
      {kept.offered === null || isReadOnly ? null : (
        <DraftOffer
          what="evidence"
          savedAt={kept.offered.savedAt}
          onTake={() => {
            const offered = kept.takeOffered();
            if (offered !== null) setEdit(offered);
          }}
          onDecline={kept.declineOffered}
        />
      )}
      {revision !== null && revision.notes.length > 0 ? (
        <Notice title="Read differently from how it was written">
          {revision.notes.map((note) => (
            <p key={note}>{note}</p>
          ))}
        </Notice>
      ) : null}
      <FormulaSection
        formula={edit.draft.formula}
        error={issueAt(issues, 'formula')}
        isReadOnly={isReadOnly}
        onChange={(formula) => change({ formula })}
      />
      <FragmentSection draft={edit.draft} issues={issues} isReadOnly={isReadOnly} teamId={unknown.teamId} onChange={change} />
      <SignalsSection draft={edit.draft} issues={issues} isReadOnly={isReadOnly} onChange={change} />
      <BandsSection draft={edit.draft} issues={issues} isReadOnly={isReadOnly} onChange={change} />
      <CorrelationsSection draft={edit.draft} issues={issues} isReadOnly={isReadOnly} onChange={change} />
      <OptionsSection draft={edit.draft} issues={issues} isReadOnly={isReadOnly} onChange={(options) => change({ options })} />
      {isReadOnly ? null : (
        <div className="sticky bottom-(--foot-bar) z-10 -mx-1 border-t border-seam bg-linen px-1 py-3 tablet:bottom-0">
          {unplaced.length > 0 ? (
            <Notice tone="madder" className="mb-3" title="This cannot be saved yet">
              {unplaced.map((issue) => (
                <p key={issue.path + issue.message}>
                  {issue.path === '' ? '' : `${issue.path}: `}
                  {issue.message}
                </p>
              ))}
            </Notice>
          ) : null}
          {isConflict ? (
            <Notice tone="weld" className="mb-3" title="Somebody saved a newer revision meanwhile">
              <p>Your edit is kept in this browser. Reload the evidence to see theirs; your edit is then offered again.</p>
              <Button size="small" className="mt-2" onClick={() => window.location.reload()}>
                Reload the evidence
              </Button>
            </Notice>
          ) : save.isError && serverIssues.length === 0 ? (
            <Notice tone="madder" className="mb-3" title="The revision was not saved">
              <p>{errorMessage(save.error)} Your edit is kept in this browser.</p>
            </Notice>
          ) : null}
          <div className="flex flex-wrap items-end justify-end gap-3">
            {isChanged ? (
              <TextInput
                label="Comment on this revision"
                isLabelHidden
                placeholder="What changed and why (optional)"
                className="min-w-0 flex-1 basis-60"
                maxLength={500}
                value={edit.comment}
                onChange={(event) => setEdit((current) => ({ ...current, comment: event.target.value }))}
              />
            ) : null}
            {isChanged ? (
              <Button
                variant="quiet"
                onClick={() => {
                  setEdit({ draft: saved, comment: '' });
                  setServerIssues([]);
                  setHasTried(false);
                  kept.clear();
                }}
              >
                Discard changes
              </Button>
            ) : null}
            {revision !== null && !isChanged ? (
              <ButtonLink to={paths.unknownRuns(unknown.id)} variant="primary">
                Go to the runs
              </ButtonLink>
            ) : (
              <Button type="submit" variant="primary" isBusy={save.isPending} disabled={!isChanged}>
                Save revision
              </Button>
            )}
          </div>
        </div>
      )}
    </form>
  );
}

const FIELD_PATHS =
  /^(formula|fragments(\.(required|excluded))?(\[\d+\].*)?|carbonSignals(\[\d+\].*)?|protonSignals(\[\d+\].*)?|correlations\.(((cosy|hsqc|hmbc)(\[\d+\].*)?)|cosyBonds|hmbcBonds|exceptions)|infraredBands(\[\d+\].*)?|massPeaks(\[\d+\].*)?|options\.(solvent|ringSizes\.(min|max)|keep|maxSeconds|maxConstitutions))$/;
/** Messages with a field of their own stand beside it; the rest stand above the button. */
function isShownByAField(path: string): boolean {
  return FIELD_PATHS.test(path);
}
