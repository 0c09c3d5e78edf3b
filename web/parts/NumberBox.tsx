import { useEffect, useId, useState } from 'react';
import { CORRECTION } from '../texts/photo.ts';

interface NumberBoxProps {
  readonly label: string;
  readonly value: number;
  readonly from: number;
  readonly to: number;
  readonly onChange: (value: number) => void;
}

const shown = (value: number): string => String(Number(value.toFixed(1)));

/** A pixel value that can be typed. While the text is no number in range, it says what is expected and changes nothing. */
export function NumberBox({ label, value, from, to, onChange }: NumberBoxProps) {
  const id = useId();
  const [text, setText] = useState(shown(value));
  const [typing, setTyping] = useState(false);
  useEffect(() => {
    if (!typing) setText(shown(value));
  }, [value, typing]);

  const typed = Number(text.trim().replace(',', '.'));
  const wrong = text.trim() === '' || !(typed >= from && typed <= to);
  return (
    <div className="number-box">
      <label htmlFor={id}>{label}</label>
      <input
        id={id}
        inputMode="decimal"
        autoComplete="off"
        value={text}
        aria-invalid={wrong}
        aria-describedby={wrong ? `${id}-expected` : undefined}
        onFocus={() => setTyping(true)}
        onBlur={() => setTyping(false)}
        onChange={(event) => {
          setText(event.target.value);
          const next = Number(event.target.value.trim().replace(',', '.'));
          if (event.target.value.trim() !== '' && next >= from && next <= to) onChange(next);
        }}
      />
      {wrong && (
        <p className="field-message" id={`${id}-expected`}>
          {CORRECTION.numberExpected(Math.ceil(from), Math.floor(to))}
        </p>
      )}
    </div>
  );
}
