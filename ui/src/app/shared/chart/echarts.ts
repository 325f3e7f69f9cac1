/** The parts of the chart library that the desk draws with; loaded with the first chart. */
import { LineChart } from 'echarts/charts';
import { AxisPointerComponent, GraphicComponent, GridComponent, TooltipComponent } from 'echarts/components';
import * as echarts from 'echarts/core';
import { CanvasRenderer } from 'echarts/renderers';

echarts.use([
  AxisPointerComponent,
  CanvasRenderer,
  GraphicComponent,
  GridComponent,
  LineChart,
  TooltipComponent,
]);

export const { init } = echarts;
