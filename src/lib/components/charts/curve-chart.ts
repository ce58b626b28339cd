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
	type Plugin
} from 'chart.js';
import { axisTop, dayOf, shortDay } from './curve';

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
const DAY_MS = 86_400_000;

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

	const chart = new Chart<'scatter', XY[]>(canvas, {
		type: 'scatter',
		data: { datasets: datasets(current, colour) },
		options: options(current, colour),
		plugins: [band]
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
			data: data.medians.map(({ atMs, value }) => ({ x: atMs, y: Math.min(value, top) })),
			showLine: true,
			borderColor: colour('ink'),
			borderWidth: 2.4,
			pointRadius: 0,
			pointHitRadius: 8,
			clip: MARK_PX,
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

function options(data: CurveData, colour: Colour) {
	const times = [...data.points, ...data.medians].map(({ atMs }) => atMs);
	const first = times.length ? Math.min(...times) : 0;
	const last = times.length ? Math.max(...times) : DAY_MS;
	const font = { family: "'Ysabeau Office Variable', sans-serif", size: 15, weight: 500 };
	const ticks = { color: colour('ink-soft'), font };
	return {
		// All marks appear together: nothing is drawn on.
		animation: false as const,
		responsive: true,
		maintainAspectRatio: false,
		scales: {
			x: {
				type: 'linear' as const,
				min: first - DAY_MS / 2,
				max: last + DAY_MS / 2,
				grid: { display: false },
				border: { color: colour('ink'), width: 1.25 },
				ticks: {
					...ticks,
					maxTicksLimit: 6,
					maxRotation: 0,
					stepSize: Math.max(1, Math.ceil((last - first) / DAY_MS / 5)) * DAY_MS,
					callback: (value: string | number) => shortDay(dayOf(Number(value)))
				}
			},
			y: {
				min: 0,
				max: topOf(data),
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
				titleFont: font,
				bodyFont: font,
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
