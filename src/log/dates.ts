/** In which order a log writes day and month; `unknown` until somebody declares it. */
export type DateOrder = 'ymd' | 'dmy' | 'mdy' | 'unknown';

export type ParsedDate = { readonly ok: true; readonly isoDate: string } | { readonly ok: false; readonly why: string };

const refused = (why: string): ParsedDate => ({ ok: false, why });

const MONTHS: Readonly<Record<string, number>> = Object.fromEntries(
  [
    'jan januar january janvier janv enero ene gennaio gen janeiro',
    'feb februar february fevrier fevr febrero febbraio fevereiro fev',
    'mar marz march mars marzo marco mrz',
    'apr april avril avr abril abr aprile',
    'may mai mayo maggio mag maio',
    'jun juni june juin junio giugno giu junho',
    'jul juli july juillet juil julio luglio lug julho',
    'aug august aout agosto ago',
    'sep sept september septembre septiembre settembre set setembro',
    'oct okt october oktober octobre octubre ottobre ott outubro out',
    'nov november novembre noviembre novembro',
    'dec dez december dezember decembre diciembre dic dicembre dezembro',
  ].flatMap((names, i) => names.split(' ').map((name) => [name, i + 1])),
);

const fold = (text: string): string => text.normalize('NFKD').replace(/\p{M}/gu, '').toLowerCase();

function calendarDate(year: number, month: number, day: number): ParsedDate {
  const date = new Date(Date.UTC(year, month - 1, day));
  const exists = date.getUTCFullYear() === year && date.getUTCMonth() === month - 1 && date.getUTCDate() === day;
  if (!exists) return refused(`there is no day ${day} of month ${month} in ${year}`);
  if (year < 1800 || year > 2200) return refused(`year must be from 1800 to 2200`);
  return { ok: true, isoDate: date.toISOString().slice(0, 10) };
}

function dayAndMonth(first: number, second: number, year: number, order: DateOrder): ParsedDate {
  if (order === 'dmy') return calendarDate(year, second, first);
  if (order === 'mdy') return calendarDate(year, first, second);
  if (first === second || first > 12) return calendarDate(year, second, first);
  if (second > 12) return calendarDate(year, first, second);
  return refused('day and month could be either; declare the date order (dmy or mdy), or write YYYY-MM-DD');
}

/**
 * A date as laboratories write it → `YYYY-MM-DD`. Ambiguous dates are never guessed: `03/04/2024` needs the declared
 * order; `2024-04-03`, `3 April 2024` and `25/04/2024` do not. A time of day after the date is left out.
 */
export function parseLogDate(text: string, order: DateOrder): ParsedDate {
  const date = text.trim().replace(/[T ]\d{1,2}:\d{2}(:\d{2})?(\.\d+)?\s*(Z|[+-]\d{2}:?\d{2}|[AaPp]\.?[Mm]\.?)?$/, '');
  const iso = /^(\d{4})[-/.年](\d{1,2})[-/.月](\d{1,2})日?$/.exec(date) ?? /^(\d{4})(\d{2})(\d{2})$/.exec(date);
  if (iso) return calendarDate(Number(iso[1]), Number(iso[2]), Number(iso[3]));
  const numeric = /^(\d{1,2})[-/. ](\d{1,2})[-/. ](\d{4})$/.exec(date);
  if (numeric) {
    if (order === 'ymd') return refused('the declared date order is year, month, day');
    return dayAndMonth(Number(numeric[1]), Number(numeric[2]), Number(numeric[3]), order);
  }
  const dayFirst = /^(\d{1,2})\.?[\s-]+(?:de\s+)?(\p{L}+)\.?,?[\s-]+(?:de\s+)?(\d{4})$/u.exec(fold(date));
  const monthFirst = /^(\p{L}+)\.?\s+(\d{1,2})(?:st|nd|rd|th)?,?\s+(\d{4})$/u.exec(fold(date));
  const [month, day, year] = dayFirst
    ? [MONTHS[dayFirst[2] ?? ''], dayFirst[1], dayFirst[3]]
    : [MONTHS[monthFirst?.[1] ?? ''], monthFirst?.[2], monthFirst?.[3]];
  if (month !== undefined && day !== undefined && year !== undefined)
    return calendarDate(Number(year), month, Number(day));
  if (/^\d{1,2}[-/.]\d{1,2}[-/.]\d{2}$/.test(date)) return refused('the year must have four digits');
  if (/^\d{5}$/.test(date))
    return refused('it looks like a day number of a spreadsheet; format the column as YYYY-MM-DD');
  return refused('it must be a date such as 2024-04-25');
}
