import { useState } from 'react';
import { asProblem } from '../api/http.ts';
import { importLog } from '../api/laboratory.ts';
import type { Problem } from '../api/problem.ts';
import type { LogImport } from '../api/types.ts';
import { DropZone } from '../parts/DropZone.tsx';
import { FilePicker } from '../parts/FilePicker.tsx';
import { ProblemNote } from '../parts/ProblemNote.tsx';
import { IMPORT } from '../texts/importLog.ts';
import { type ChosenFiles, megabytesText, withDropped } from './chosenFiles.ts';
import { ImportResult } from './ImportResult.tsx';

type Work = { readonly dryRun: boolean; readonly share: number } | null;

interface Finished {
  readonly dryRun: boolean;
  readonly result: LogImport;
}

/** Importing a log: choose, check without storing, import, see what was refused and why. */
export function ImportPage() {
  const [files, setFiles] = useState<ChosenFiles>({ log: null, photos: [] });
  const [work, setWork] = useState<Work>(null);
  const [finished, setFinished] = useState<Finished | null>(null);
  const [problem, setProblem] = useState<Problem | null>(null);

  const choose = (next: ChosenFiles) => {
    setFiles(next);
    setFinished(null);
    setProblem(null);
  };
  const run = async (dryRun: boolean) => {
    if (files.log === null) return;
    setWork({ dryRun, share: 0 });
    setProblem(null);
    try {
      const result = await importLog(files.log, files.photos, dryRun, (share) => setWork({ dryRun, share }));
      setFinished({ dryRun, result });
    } catch (error) {
      setProblem(asProblem(error));
    } finally {
      setWork(null);
    }
  };

  const importable = finished?.dryRun ? finished.result.stored + finished.result.updated : null;
  return (
    <article className="import-page">
      <h1>{IMPORT.title}</h1>
      <p className="lead">{IMPORT.lead}</p>
      <DropZone label={IMPORT.title} className="panel" onFiles={(dropped) => choose(withDropped(files, dropped))}>
        <div className="import-files">
          <div>
            <h2>{IMPORT.log}</h2>
            <p className="chosen">{files.log?.name ?? IMPORT.noLog}</p>
            <FilePicker
              label={IMPORT.chooseLog}
              accept=".csv,.tsv,.txt,text/csv"
              disabled={work !== null}
              className={files.log === null ? 'primary' : ''}
              onFiles={([log]) => choose({ ...files, log: log ?? null })}
            />
          </div>
          <div>
            <h2>{IMPORT.photos}</h2>
            <p className="chosen">
              {files.photos.length === 0
                ? IMPORT.noPhotos
                : IMPORT.chosenPhotos(files.photos.length, megabytesText(files.photos))}
            </p>
            <FilePicker
              label={IMPORT.choosePhotos}
              accept="image/*,.heic,.heif,.zip,application/zip"
              multiple
              disabled={work !== null}
              onFiles={(photos) => choose({ ...files, photos })}
            />
          </div>
        </div>
        <p className="drop-detail">{IMPORT.dropHere}</p>
        <div className="form-actions">
          <button type="button" disabled={files.log === null || work !== null} onClick={() => void run(true)}>
            {IMPORT.check}
          </button>
          <button
            type="button"
            className="primary"
            disabled={files.log === null || work !== null}
            onClick={() => void run(false)}
          >
            {importable === null ? IMPORT.store : IMPORT.storeRows(importable)}
          </button>
        </div>
        {work !== null && (
          <div className="progress" role="status">
            <progress aria-label={IMPORT.title} {...(work.share < 1 ? { value: work.share, max: 1 } : {})} />
            <span>
              {work.share < 1
                ? IMPORT.sending(Math.round(work.share * 100))
                : work.dryRun
                  ? IMPORT.checking
                  : IMPORT.working}
            </span>
          </div>
        )}
        {problem !== null && <ProblemNote problem={problem} />}
      </DropZone>
      {finished !== null && <ImportResult {...finished} />}
      <section className="panel headers-help">
        <h2>{IMPORT.headersTitle}</h2>
        <p className="headers">{IMPORT.headers}</p>
        <p>{IMPORT.headersDetail}</p>
      </section>
    </article>
  );
}
