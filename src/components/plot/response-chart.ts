import { LineChart } from 'echarts/charts'
import { GridComponent } from 'echarts/components'
import { init, use, type ECharts } from 'echarts/core'
import { SVGRenderer } from 'echarts/renderers'
import type { BenchCurve } from '../../composables/use-bench'
import { PLOT_MARGIN, type PlotScale } from './plot-scale'

use([LineChart, GridComponent, SVGRenderer])

const MINUS = '\u2212'
const signed = (value: number) => String(value).replace('-', MINUS)

/** A frequency at a decade line: 100, 1 k, 10 k. */
export function decadeLabel(hertz: number): string {
  const power = Math.round(Math.log10(hertz))
  const prefix = { '-2': 'm', '-1': '', '0': '', '1': 'k', '2': 'M', '3': 'G' }[String(Math.floor(power / 3))]
  if (power < 0) return power < -3 ? `${10 ** (power + 6)} µ` : `${10 ** (power + 3)} m`
  return prefix === undefined ? '' : `${10 ** (power - 3 * Math.floor(power / 3))}${prefix && ` ${prefix}`}`
}

/** Draws a response into an element: magnitude solid petrol, phase dashed copper. */
export class ResponseChart {
  private readonly chart: ECharts
  private shownScale = ''

  constructor(private readonly element: HTMLElement) {
    this.chart = init(element, null, { renderer: 'svg' })
  }

  /** Draws the curve; axes are set anew only when the scale, theme or size changed. */
  draw(curve: BenchCurve, scale: PlotScale, force = false) {
    const pairs = (values: number[]) => curve.frequenciesHz.map((f, k): [number, number] => [f, values[k]!])
    const key = JSON.stringify(scale)
    const series = [
      { id: 'magnitude', data: pairs(curve.magnitudeDb.map((db) => Math.max(db, scale.bottomDb - 200))) },
      { id: 'phase', data: pairs(curve.phaseDegrees) },
    ]
    if (!force && key === this.shownScale) {
      this.chart.setOption({ series }, { silent: true })
      return
    }
    this.shownScale = key
    this.chart.setOption(this.whole(scale, series), { notMerge: true })
  }

  resize() {
    this.chart.resize()
  }

  dispose() {
    this.chart.dispose()
  }

  private whole(scale: PlotScale, series: { id: string; data: [number, number][] }[]) {
    const css = getComputedStyle(this.element)
    const colour = (name: string) => css.getPropertyValue(name).trim()
    const label = { color: colour('--ink'), fontFamily: css.getPropertyValue('--mono'), fontSize: 12 }
    const line = { lineStyle: { color: colour('--plot-grid'), width: 1 } }
    const rule = { lineStyle: { color: colour('--rule'), width: 1 } }
    const value = (top: number, bottom: number, words: (value: number) => string, position: 'left' | 'right') => ({
      type: 'value',
      position,
      min: bottom,
      max: top,
      interval: (top - bottom) / scale.steps,
      axisLine: { show: true, ...rule },
      axisTick: { show: false },
      axisLabel: { ...label, formatter: words, margin: 7 },
      splitLine: { show: position === 'left', ...line },
    })
    return {
      animation: false,
      aria: { enabled: false },
      grid: { ...PLOT_MARGIN, containLabel: false },
      xAxis: {
        type: 'log',
        min: scale.fromHz,
        max: scale.toHz,
        axisLine: { onZero: false, ...rule },
        axisTick: { show: false },
        axisLabel: { ...label, formatter: decadeLabel, hideOverlap: true },
        splitLine: { show: true, ...rule, lineStyle: { color: colour('--hairline'), width: 1 } },
        minorTick: { show: false, splitNumber: 9 },
        minorSplitLine: { show: true, ...line },
      },
      yAxis: [
        value(scale.topDb, scale.bottomDb, signed, 'left'),
        value(scale.topDegrees, scale.bottomDegrees, (degrees) => `${signed(degrees)}°`, 'right'),
      ],
      series: [
        { ...SERIES, ...series[0], yAxisIndex: 0, lineStyle: { color: colour('--petrol'), width: 2.4 } },
        { ...SERIES, ...series[1], yAxisIndex: 1, lineStyle: { color: colour('--copper'), width: 1.8, type: [6, 4] } },
      ],
    }
  }
}

const SERIES = {
  type: 'line',
  showSymbol: false,
  silent: true,
  emphasis: { disabled: true },
  clip: true,
  animation: false,
} as const
