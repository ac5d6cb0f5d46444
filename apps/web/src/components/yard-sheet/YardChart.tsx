import { formatDay } from '@strikeboard/domain/zone';
import { Bar, BarChart, CartesianGrid, Legend, ResponsiveContainer, Tooltip, XAxis, YAxis } from 'recharts';
import type { YardSheetView } from '../../lib/api/schemas/yard-sheet.ts';
import { office } from '../../lib/words/office.en.ts';

const words = office.yardSheet;

/** Shades that differ in lightness as well as in hue, so that print and colour-blind eyes tell them apart. */
const fills = ['#22374d', '#c18a2e', '#7f8b93', '#5c7f67', '#8a4b3c', '#b9c3ca', '#d9b97a', '#3f5f7f'];

/** Yards ordered per week, a bar per week stacked by crew. The table beside it says the same in numbers. */
export function YardChart({ sheet }: { sheet: YardSheetView }) {
  const rows = sheet.weeks.map((week, index) => ({
    week: week.when === 'current' ? words.thisWeek : formatDay(week.startsOn, 'en').slice(4),
    ...Object.fromEntries(
      sheet.byCrew.map((crew) => [crew.crewId, Number(crew.weeks[index]?.orderedYd3 ?? 0)]),
    ),
  }));
  return (
    <div className="h-80 w-full" aria-hidden="true">
      <ResponsiveContainer width="100%" height="100%" initialDimension={{ width: 600, height: 320 }}>
        <BarChart accessibilityLayer={false} data={rows} margin={{ top: 22, right: 8, bottom: 0, left: 0 }}>
          <CartesianGrid vertical={false} stroke="var(--line)" />
          <XAxis dataKey="week" stroke="var(--ink-soft)" tick={{ fontSize: 12, fill: 'var(--ink-soft)' }} />
          <YAxis
            width={72}
            tickFormatter={(value: number) => words.yards(value.toLocaleString('en-US'))}
            stroke="var(--ink-soft)"
            tick={{ fontSize: 12, fill: 'var(--ink-soft)' }}
          />
          <Tooltip
            cursor={{ fill: 'var(--concrete)' }}
            contentStyle={{
              background: 'var(--sheet)',
              border: '1px solid var(--line-strong)',
              borderRadius: 3,
            }}
            formatter={(value, name) => [words.yards(String(value)), name]}
          />
          <Legend
            wrapperStyle={{ fontSize: 13 }}
            itemSorter={null}
            formatter={(name) => <span className="text-ink">{name}</span>}
          />
          {sheet.byCrew.map((crew, index) => (
            <Bar
              key={crew.crewId}
              dataKey={crew.crewId}
              name={crew.crewName}
              stackId="yards"
              fill={fills[index % fills.length] ?? '#22374d'}
              stroke="var(--sheet)"
              isAnimationActive={false}
            />
          ))}
        </BarChart>
      </ResponsiveContainer>
    </div>
  );
}
