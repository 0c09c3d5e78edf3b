import { type DragEvent, type ReactNode, useRef, useState } from 'react';

interface DropZoneProps {
  readonly label: string;
  readonly onFiles: (files: readonly File[]) => void;
  readonly className?: string;
  readonly children: ReactNode;
}

const carriesFiles = (event: DragEvent) => event.dataTransfer.types.includes('Files');

/** An area files can be dropped on. Dropping is a shortcut: a file picker always stands beside it. */
export function DropZone({ label, onFiles, className = '', children }: DropZoneProps) {
  const [over, setOver] = useState(false);
  // Entering a child fires enter before leave, so the depth is counted.
  const depth = useRef(0);
  return (
    <section
      aria-label={label}
      className={`drop-zone ${over ? 'drop-over' : ''} ${className}`}
      onDragEnter={(event) => {
        if (!carriesFiles(event)) return;
        depth.current += 1;
        setOver(true);
      }}
      onDragLeave={(event) => {
        if (!carriesFiles(event)) return;
        depth.current -= 1;
        if (depth.current <= 0) setOver(false);
      }}
      onDragOver={(event) => {
        if (carriesFiles(event)) event.preventDefault();
      }}
      onDrop={(event) => {
        if (!carriesFiles(event)) return;
        event.preventDefault();
        depth.current = 0;
        setOver(false);
        const files = [...event.dataTransfer.files];
        if (files.length > 0) onFiles(files);
      }}
    >
      {children}
    </section>
  );
}
