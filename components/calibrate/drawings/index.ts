import DrawCardStrip from './DrawCardStrip.vue'
import DrawCheck from './DrawCheck.vue'
import DrawCoat from './DrawCoat.vue'
import DrawCurve from './DrawCurve.vue'
import DrawDarken from './DrawDarken.vue'
import DrawExpose from './DrawExpose.vue'
import DrawFilmDown from './DrawFilmDown.vue'
import DrawFilmDry from './DrawFilmDry.vue'
import DrawFilmSide from './DrawFilmSide.vue'
import DrawFoil from './DrawFoil.vue'
import DrawHang from './DrawHang.vue'
import DrawInkLoad from './DrawInkLoad.vue'
import DrawInkTrial from './DrawInkTrial.vue'
import DrawPath from './DrawPath.vue'
import DrawPhone from './DrawPhone.vue'
import DrawScan from './DrawScan.vue'
import DrawWash from './DrawWash.vue'

/** The walk's pictures by name, so that a step's words can name theirs. */
export const drawings = {
  DrawCardStrip, DrawCheck, DrawCoat, DrawCurve, DrawDarken, DrawExpose, DrawFilmDown, DrawFilmDry, DrawFilmSide,
  DrawFoil, DrawHang, DrawInkLoad, DrawInkTrial, DrawPath, DrawPhone, DrawScan, DrawWash,
}
export type DrawingName = keyof typeof drawings
