import { type KeyboardEvent, useState } from 'react';
import { NumberBox } from '../parts/NumberBox.tsx';
import { TextField } from '../parts/TextField.tsx';
import { CORRECTION } from '../texts/photo.ts';
import { CorrectionStage } from './CorrectionStage.tsx';
import type { Correction, CorrectionAction } from './correction.ts';
import { handleName } from './Handles.tsx';
import type { HandResult } from './measureScene.ts';
import { photoPointOf } from './sceneOfReading.ts';
import { FEWEST_TRACE_POINTS, handlePosition, SMALLEST_DIAMETER_PX, type TraceScene } from './traceScene.ts';

interface CorrectionPanelProps {
  readonly sha256: string;
  readonly fileName: string;
  readonly correction: Correction;
  readonly result: HandResult;
  readonly start: TraceScene;
  readonly saving: boolean;
  readonly act: (action: CorrectionAction) => void;
  readonly onSave: (by: { readonly operator: string; readonly remarks: string }) => void;
  readonly onLeave: () => void;
}

/** Correcting the trace by hand: the photo, the tools, the numbers, and saving it as a reading of its own. */
export function CorrectionPanel(props: CorrectionPanelProps) {
  const { correction, act, result, start, saving, onSave, onLeave } = props;
  const [operator, setOperator] = useState('');
  const [remarks, setRemarks] = useState('');
  const fit = result.measured?.fittedPx.map(photoPointOf) ?? [];

  const shortcut = (event: KeyboardEvent) => {
    if (!(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== 'z') return;
    if (event.target instanceof HTMLInputElement) return;
    event.preventDefault();
    act({ do: event.shiftKey ? 'redo' : 'undo' });
  };

  return (
    // biome-ignore lint/a11y/noStaticElementInteractions: undo by keyboard works from every control inside
    <div className="correction" onKeyDown={shortcut}>
      <p className="help">{CORRECTION.help}</p>
      <CorrectionTools correction={correction} act={act} start={start} />
      <CorrectionStage sha256={props.sha256} fileName={props.fileName} correction={correction} fit={fit} act={act} />
      <SelectedHandle correction={correction} act={act} />
      <div className="correction-save">
        <TextField
          label={CORRECTION.operator}
          value={operator}
          onChange={setOperator}
          maxLength={200}
          autoComplete="name"
        />
        <TextField label={CORRECTION.remarks} value={remarks} onChange={setRemarks} maxLength={2000} />
        <button
          type="button"
          className="primary"
          disabled={saving || result.measured === null}
          onClick={() => onSave({ operator, remarks })}
        >
          {saving ? CORRECTION.saving : CORRECTION.save}
        </button>
        <button type="button" onClick={onLeave}>
          {CORRECTION.leave}
        </button>
      </div>
    </div>
  );
}

interface ToolsProps {
  readonly correction: Correction;
  readonly act: (action: CorrectionAction) => void;
}

function CorrectionTools({ correction, act, start }: ToolsProps & { readonly start: TraceScene }) {
  const { selected, tool, past, future, scene } = correction;
  const adding = tool.name === 'addingPoints';
  const index = selected?.kind === 'trace' ? selected.index : null;
  return (
    <div className="tool-bar" role="toolbar" aria-label={CORRECTION.title}>
      <button
        type="button"
        aria-pressed={adding}
        title={CORRECTION.addPointsHint}
        onClick={() => act({ do: 'addPoints', on: !adding })}
      >
        {CORRECTION.addPoints}
      </button>
      <button
        type="button"
        disabled={index === null || scene.trace.length <= FEWEST_TRACE_POINTS}
        title={CORRECTION.fewest(FEWEST_TRACE_POINTS)}
        onClick={() => index !== null && act({ do: 'remove', index })}
      >
        {CORRECTION.removePoint}
      </button>
      <button type="button" disabled={past.length === 0} onClick={() => act({ do: 'undo' })}>
        {CORRECTION.undo}
      </button>
      <button type="button" disabled={future.length === 0} onClick={() => act({ do: 'redo' })}>
        {CORRECTION.redo}
      </button>
      <button type="button" disabled={past.length === 0} onClick={() => act({ do: 'startAgain', scene: start })}>
        {CORRECTION.startAgain}
      </button>
      {adding && <span className="tool-hint">{CORRECTION.addPointsHint}</span>}
    </div>
  );
}

/** Number fields for what is selected, so that everything a hand can drag can also be typed. */
function SelectedHandle({ correction, act }: ToolsProps) {
  const { scene, selected, photo } = correction;
  const at = selected === null ? undefined : handlePosition(scene, selected);
  return (
    <fieldset className="selected-handle">
      <legend>
        {CORRECTION.selected}: {selected === null ? CORRECTION.nothingSelected : handleName(selected, scene)}
      </legend>
      {selected !== null && selected.kind !== 'edge' && at !== undefined && (
        <>
          <NumberBox
            label={CORRECTION.x}
            value={at.xPx}
            from={0}
            to={photo.width - 1}
            onChange={(xPx) => act({ do: 'place', handle: selected, at: { ...at, xPx } })}
          />
          <NumberBox
            label={CORRECTION.y}
            value={at.yPx}
            from={0}
            to={photo.height - 1}
            onChange={(yPx) => act({ do: 'place', handle: selected, at: { ...at, yPx } })}
          />
        </>
      )}
      <NumberBox
        label={CORRECTION.diameter}
        value={scene.diameterPx}
        from={SMALLEST_DIAMETER_PX}
        to={Math.hypot(photo.width, photo.height)}
        onChange={(diameterPx) => act({ do: 'setDiameter', diameterPx })}
      />
    </fieldset>
  );
}
