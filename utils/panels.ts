/** The editor's panels: on a desk in dialogs, on a phone below the state that they belong to. */
export type PanelName = 'tones' | 'mix' | 'crop' | 'size' | 'film' | 'bench' | 'aim'
export const panelTitles: Record<PanelName, string> = {
  tones: 'Tones', mix: 'Grey from', crop: 'Crop and turn', size: 'Print size', film: 'Film', bench: 'Bench', aim: 'Aim',
}
