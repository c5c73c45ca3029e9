// What the panel needs of ECharts and nothing more: line charts on a grid, lines and points that mark the plan,
// the text alternative, and drawing as SVG.
import { init, use } from "echarts/core";
import { LineChart } from "echarts/charts";
import { AriaComponent, GridComponent, MarkLineComponent } from "echarts/components";
import { SVGRenderer } from "echarts/renderers";

use([LineChart, GridComponent, MarkLineComponent, AriaComponent, SVGRenderer]);

globalThis.footingChart = { init };
