import { addDays, formatDay, type SiteDay } from '@strikeboard/domain/zone';
import { office } from '../../lib/words/office.en.ts';
import { hourMarks, type Scale, shareOfDay } from './scale.ts';

const words = office.board;

/** The days over the lanes, each with the hours of its rule. */
export function DayHeads({
  scale,
  headWidthPx,
  today,
}: {
  scale: Scale;
  headWidthPx: number;
  today: SiteDay;
}) {
  const marks = hourMarks(scale);
  return (
    <div
      className="sticky top-0 z-20 flex border-b-2 border-line-strong bg-concrete"
      style={{ width: headWidthPx + scale.days * scale.dayWidthPx }}
    >
      <div
        className="sticky left-0 z-10 shrink-0 border-r border-line-strong bg-concrete px-2 py-1 text-sm font-medium"
        style={{ width: headWidthPx }}
      >
        {words.crew}
      </div>
      {Array.from({ length: scale.days }, (_, column) => addDays(scale.from, column)).map((day) => (
        <div
          key={day}
          aria-current={day === today ? 'date' : undefined}
          className={`relative h-11 shrink-0 border-r border-line-strong ${day === today ? 'bg-lumber-wash' : ''}`}
          style={{ width: scale.dayWidthPx }}
        >
          <span className={`block px-1.5 pt-0.5 text-sm ${day === today ? 'font-semibold' : 'font-medium'}`}>
            {formatDay(day, 'en')}
            {day === today && <span className="ml-1.5 text-xs font-medium">{words.today}</span>}
          </span>
          {marks.map((hour) => (
            <span
              key={hour}
              aria-hidden="true"
              className="absolute bottom-0 -translate-x-1/2 text-[0.6875rem] leading-4 text-ink-soft"
              style={{ left: shareOfDay(hour * 60, scale) * scale.dayWidthPx }}
            >
              {hour % 12 === 0 ? 12 : hour % 12}
            </span>
          ))}
        </div>
      ))}
    </div>
  );
}
