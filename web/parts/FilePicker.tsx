import { type ChangeEvent, useId } from 'react';

interface FilePickerProps {
  readonly label: string;
  readonly accept: string;
  readonly multiple?: boolean;
  /** Opens the rear camera of a tablet instead of the file list. */
  readonly camera?: boolean;
  readonly disabled?: boolean;
  readonly className?: string;
  readonly onFiles: (files: readonly File[]) => void;
}

/** A file input that looks like a button; the same file can be chosen twice in a row. */
export function FilePicker({ label, accept, multiple, camera, disabled, className = '', onFiles }: FilePickerProps) {
  const id = useId();
  const chosen = (event: ChangeEvent<HTMLInputElement>) => {
    const files = [...(event.target.files ?? [])];
    event.target.value = '';
    if (files.length > 0) onFiles(files);
  };
  return (
    <span className={`file-picker ${className}`}>
      <input
        id={id}
        type="file"
        accept={accept}
        multiple={multiple}
        disabled={disabled}
        onChange={chosen}
        {...(camera ? { capture: 'environment' as const } : {})}
      />
      <label htmlFor={id} className="button">
        {label}
      </label>
    </span>
  );
}
