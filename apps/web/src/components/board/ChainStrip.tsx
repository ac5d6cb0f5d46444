import type { Chain } from '@strikeboard/domain/chain';

/**
 * A pour's chain to scale, across the width of its card: set-up as a thin line, placing as a solid block with a tick
 * per truck, the window of finishability as a wedge that narrows, wash-up as a thin tail.
 */
export function ChainStrip({
  chain,
  xOfMs,
  widthPx,
}: {
  chain: Chain;
  xOfMs: (ms: number) => number;
  widthPx: number;
}) {
  const left = xOfMs(chain.crewStartMs);
  const x = (ms: number) => xOfMs(ms) - left;
  const placing = { from: x(chain.firstLoadMs), until: x(chain.lastLoadMs) };
  const wedge = { from: x(chain.window.opensMs), until: x(chain.finishing.endMs) };
  return (
    <svg
      aria-hidden="true"
      width={widthPx}
      height="14"
      viewBox={`0 0 ${widthPx} 14`}
      preserveAspectRatio="none"
      className="block"
    >
      <line x1="0" x2={widthPx} y1="10" y2="10" stroke="var(--line-strong)" strokeWidth="1.5" />
      <path
        d={`M${wedge.from} 2 L${wedge.until} 8.5 L${wedge.until} 11.5 L${wedge.from} 12 Z`}
        fill="var(--line-strong)"
        opacity="0.55"
      />
      <rect
        x={placing.from}
        y="3"
        width={Math.max(placing.until - placing.from, 2)}
        height="9"
        fill="var(--settled)"
      />
      {chain.loads.map((load) => (
        <line
          key={load.arriveMs}
          x1={x(load.arriveMs)}
          x2={x(load.arriveMs)}
          y1="0"
          y2="12"
          stroke="var(--sheet)"
          strokeWidth="1"
        />
      ))}
      {chain.loads.map((load) => (
        <rect
          key={`tick-${load.arriveMs}`}
          x={x(load.arriveMs)}
          y="0"
          width="1.5"
          height="4"
          fill="var(--settled)"
        />
      ))}
    </svg>
  );
}
