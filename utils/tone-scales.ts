/** Scales for places where nothing is computed: 21 even steps of lightness in the three states, a blue print among them. */
export const plainScales = {
  photo: ['#000000', '#111111', '#1B1B1B', '#262626', '#303030', '#3B3B3B', '#474747', '#525252', '#5E5E5E', '#6A6A6A', '#777777', '#848484', '#919191', '#9E9E9E', '#ABABAB', '#B9B9B9', '#C6C6C6', '#D4D4D4', '#E2E2E2', '#F1F1F1', '#FFFFFF'],
  film: ['#16181C', '#25272B', '#323437', '#3C3E41', '#45474A', '#4E5052', '#56585A', '#5D5F61', '#646668', '#6B6D6E', '#727475', '#797B7C', '#808283', '#888A8A', '#909292', '#999B9A', '#A2A4A4', '#AEB0AF', '#BCBEBC', '#CED0CE', '#EEF0ED'],
  print: ['#23365E', '#233F6B', '#224878', '#245184', '#265A8E', '#296499', '#2B6EA4', '#3777AC', '#4180B3', '#4B8ABB', '#5594C2', '#639DC8', '#71A6CE', '#7EB0D4', '#8BB9D9', '#9BC2DD', '#ABCBE1', '#BBD4E4', '#CDDDE6', '#DEE6E7', '#F0EEE5'],
} as const
