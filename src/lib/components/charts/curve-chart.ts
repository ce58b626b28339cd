/**
 * The curve drawn by Chart.js; loaded only where a curve is shown. Colours come from the theme's
 * custom properties, so light and dark redraw alike.
 */
import {
	Chart,
	LinearScale,
	LineController,
	LineElement,
	PointElement,
	ScatterController,
	Tooltip,
	type ChartDataset,
	type Plugin,
	type Scale
} from 'chart.js';
import { axisDays, axisTop, dayOf, dayTicks, shortDay } from './curve';

Chart.register(LinearScale, LineController, LineElement, PointElement, ScatterController, Tooltip);

export interface CurveData {
	readonly points: readonly { atMs: number; value: number }[];
	readonly medians: readonly { atMs: number; value: number }[];
	readonly tolerance: number | null;
	/** Unit of the errors, written out: "cents". */
	readonly unit: string;
}

export interface CurveChart {
	/** Takes the colours anew after light or dark has changed. */
	redraw(): void;
	update(data: CurveData): void;
	destroy(): void;
}

type XY = { x: number; y: number };

/** Narrower axes carry fewer days. */
const NARROW_PX = 520;
/** Room above the drawing for the figures of what lies beyond its upper end. */
const BEYOND_PX = 30;
const FONT = { family: "'Ysabeau Office Variable', sans-serif", size: 15, weight: 500 };

/** Draws the curve in a canvas. */
export function drawCurve(canvas: HTMLCanvasElement, data: CurveData): CurveChart {
	let current = data;
	const colour = (name: string) =>
		getComputedStyle(canvas).getPropertyValue(`--${name}`).trim() || 'currentColor';

	const band: Plugin<'scatter'> = {
		id: 'tolerance',
		beforeDatasetsDraw({ ctx, chartArea, scales }) {
			if (current.tolerance === null) return;
			const top = scales.y.getPixelForValue(current.tolerance);
			ctx.save();
			ctx.fillStyle = colour('brass-wash');
			ctx.fillRect(chartArea.left, top, chartArea.width, chartArea.bottom - top);
			ctx.strokeStyle = colour('brass');
			ctx.lineWidth = 2;
			ctx.beginPath();
			ctx.moveTo(chartArea.left, top);
			ctx.lineTo(chartArea.right, top);
			ctx.stroke();
			ctx.restore();
		}
	};

	/** What lies beyond the upper end stands at the edge: an arrow and its figure say how far. */
	const beyond: Plugin<'scatter'> = {
		id: 'beyond',
		afterDatasetsDraw({ ctx, chartArea, scales }) {
			const top = topOf(current);
			const y = chartArea.top;
			let freeFrom = -Infinity;
			ctx.save();
			ctx.strokeStyle = ctx.fillStyle = colour('felt');
			ctx.lineWidth = 1.8;
			ctx.textAlign = 'center';
			ctx.font = `700 ${FONT.size}px ${FONT.family}`;
			for (const { atMs, value } of beyondOf(current, top)) {
				const x = scales.x.getPixelForValue(atMs);
				ctx.beginPath();
				ctx.moveTo(x - 4, y - 8.5);
				ctx.lineTo(x, y - 12.5);
				ctx.lineTo(x + 4, y - 8.5);
				ctx.stroke();
				const text = value < 10 ? value.toFixed(1) : String(Math.round(value));
				const half = ctx.measureText(text).width / 2;
				if (x - half < freeFrom) continue;
				ctx.fillText(text, Math.min(x, chartArea.right - half), y - 16.5);
				freeFrom = x + half + 6;
			}
			ctx.restore();
		}
	};

	const chart = new Chart<'scatter', XY[]>(canvas, {
		type: 'scatter',
		data: { datasets: datasets(current, colour) },
		options: options(current, colour),
		plugins: [band, beyond]
	});

	const renew = () => {
		chart.data.datasets = datasets(current, colour);
		chart.options = options(current, colour);
		chart.update('none');
	};
	return {
		redraw: renew,
		update(next) {
			current = next;
			renew();
		},
		destroy: () => chart.destroy()
	};
}

type Colour = (name: string) => string;

/** A mark on the edge of the drawing is shown whole: this far beyond nothing is cut off. */
const MARK_PX = 9;

function datasets(data: CurveData, colour: Colour): ChartDataset<'scatter', XY[]>[] {
	const top = topOf(data);
	const outside = (value: number) => data.tolerance !== null && value > data.tolerance;
	const points = data.points.map(({ atMs, value }) => ({ x: atMs, y: Math.min(value, top) }));
	const isOut = data.points.map(({ value }) => outside(value));
	return [
		{
			label: 'median of the day',
			data: data.medians.map(({ atMs, value }) => ({ x: atMs, y: value })),
			showLine: true,
			borderColor: colour('ink'),
			borderWidth: 2.4,
			pointRadius: 0,
			pointHitRadius: 8,
			clip: { left: MARK_PX, top: 0, right: MARK_PX, bottom: MARK_PX },
			order: 1
		},
		{
			// Inside: filled dots; outside: hollow diamonds. Shape says it before colour does.
			label: 'attempt',
			data: points,
			pointStyle: isOut.map((out) => (out ? 'rectRot' : 'circle')),
			pointRadius: isOut.map((out) => (out ? 5 : 4)),
			pointHoverRadius: 6,
			pointBackgroundColor: isOut.map((out) => (out ? colour('ground') : colour('ink'))),
			pointBorderColor: isOut.map((out) => (out ? colour('felt') : colour('ink'))),
			pointBorderWidth: 1.8,
			clip: MARK_PX,
			order: 2
		}
	];
}

const topOf = (data: CurveData) =>
	axisTop(
		[...data.points, ...data.medians].map(({ value }) => value),
		data.tolerance
	);

/** The attempts above the upper end, in order of time. */
const beyondOf = (data: CurveData, top: number) =>
	data.points.filter(({ value }) => value > top).sort((a, b) => a.atMs - b.atMs);

function options(data: CurveData, colour: Colour) {
	const span = axisDays([...data.points, ...data.medians].map(({ atMs }) => atMs));
	const top = topOf(data);
	const ticks = { color: colour('ink-soft'), font: FONT };
	return {
		// All marks appear together: nothing is drawn on.
		animation: false as const,
		responsive: true,
		maintainAspectRatio: false,
		layout: { padding: { top: beyondOf(data, top).length > 0 ? BEYOND_PX : 8 } },
		scales: {
			x: {
				type: 'linear' as const,
				min: span[0],
				max: span[1],
				grid: { display: false },
				border: { color: colour('ink'), width: 1.25 },
				afterBuildTicks: (axis: Scale) => {
					const most = axis.width < NARROW_PX ? 3 : 6;
					axis.ticks = dayTicks(span, most).map((value) => ({ value }));
				},
				ticks: {
					...ticks,
					autoSkip: false,
					maxRotation: 0,
					align: 'inner' as const,
					callback: (value: string | number) => shortDay(dayOf(Number(value)))
				}
			},
			y: {
				min: 0,
				max: top,
				grid: { color: colour('hair'), drawTicks: false },
				border: { display: false },
				ticks: { ...ticks, maxTicksLimit: 6, padding: 8 }
			}
		},
		plugins: {
			legend: { display: false },
			tooltip: {
				backgroundColor: colour('ink'),
				titleColor: colour('on-ink'),
				bodyColor: colour('on-ink'),
				titleFont: FONT,
				bodyFont: FONT,
				displayColors: false,
				cornerRadius: 2,
				callbacks: {
					title: (items: { parsed: { x: number | null } }[]) =>
						items.length ? shortDay(dayOf(items[0].parsed.x ?? 0)) : '',
					label: (item: {
						datasetIndex: number;
						dataIndex: number;
						dataset: { label?: string };
					}) => {
						const source = item.datasetIndex === 0 ? data.medians : data.points;
						const value = source[item.dataIndex]?.value ?? 0;
						return `${item.dataset.label}: ${value.toFixed(2)} ${data.unit}`;
					}
				}
			}
		}
	};
}
