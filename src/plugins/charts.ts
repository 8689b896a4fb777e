import { LineChart, ScatterChart } from "echarts/charts";
import { AriaComponent, GridComponent, MarkLineComponent, TooltipComponent } from "echarts/components";
import { use } from "echarts/core";
import { CanvasRenderer } from "echarts/renderers";
import VChart from "vue-echarts";

/** The parts of ECharts that the house draws with; only lazily loaded components import this file. */
use([LineChart, ScatterChart, AriaComponent, GridComponent, MarkLineComponent, TooltipComponent, CanvasRenderer]);

export { VChart };
