/** Seven colours that stay apart for most kinds of colour vision: Okabe and Ito's palette, common practice. Never the only difference. */
export const PALETTE = ['#0072b2', '#d55e00', '#009e73', '#cc79a7', '#e69f00', '#56b4e9', '#000000'] as const;
