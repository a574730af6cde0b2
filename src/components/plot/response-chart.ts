import { LineChart } from 'echarts/charts'
import { GridComponent } from 'echarts/components'
import { init, use, type ECharts } from 'echarts/core'
import { SVGRenderer } from 'echarts/renderers'
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

/**
 * The frame of a response plot: axes, grid and labels. The curves change with every key and are drawn beside it as plain
 * paths, which takes a small part of the time that a chart needs for new data.
 */
export class ResponseFrame {
  private readonly chart: ECharts
  private shownScale = ''

  constructor(private readonly element: HTMLElement) {
    this.chart = init(element, null, { renderer: 'svg' })
  }

  /** Draws the frame when the scale has changed, or when theme or size have. */
  draw(scale: PlotScale, force = false) {
    const key = JSON.stringify(scale)
    if (!force && key === this.shownScale) return
    this.shownScale = key
    this.chart.setOption(this.whole(scale), { notMerge: true })
  }

  resize() {
    this.chart.resize()
  }

  dispose() {
    this.chart.dispose()
  }

  private whole(scale: PlotScale) {
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
      // An axis is drawn only where a series stands on it.
      series: [0, 1].map((yAxisIndex) => ({ type: 'line', yAxisIndex, data: [], silent: true })),
    }
  }
}
