import type { CSSProperties } from 'react';

/** The studio's colours as mail programs understand them: the sRGB values of the tokens in `styles/global.css`. */
const CHALK = '#f2f7f7';
const GRAPHITE = '#182427';
const MUTED = '#4e5e61';
const HAIRLINE = '#c8d3d4';
const VERDIGRIS_TINT = '#c5e6e1';
const MOLTEN = '#f26900';
const SOOT = '#0f181a';

const TEXT_FONT = "Archivo, 'Helvetica Neue', Helvetica, Arial, sans-serif";
const TITLE_FONT = "Fraunces, Georgia, 'Times New Roman', serif";

/** Cuts the lower corners in where a mail program can; elsewhere the ground stays a plain rectangle. */
const draft = (width: number) => `polygon(0 0, 100% 0, calc(100% - ${width}px) 100%, ${width}px 100%)`;

const BUTTON: CSSProperties = {
  display: 'inline-block',
  fontSize: '16px',
  lineHeight: '22px',
  fontWeight: 700,
  textDecoration: 'none',
  padding: '14px 30px',
  clipPath: draft(9),
};

const style = <T extends Record<string, CSSProperties>>(sheet: T): T => sheet;

/** Styles of a letter. Mail programs read no style sheets, so every element carries its own. */
export const LOOK = style({
  body: { backgroundColor: CHALK, color: GRAPHITE, fontFamily: TEXT_FONT, margin: 0, padding: 0 },
  frame: { width: '100%', maxWidth: '600px', margin: '0 auto', padding: '28px 24px 40px' },
  studio: { fontFamily: TITLE_FONT, fontSize: '18px', lineHeight: '24px', letterSpacing: '-0.2px', margin: 0 },
  ref: { fontSize: '14px', lineHeight: '24px', color: MUTED, margin: 0, textAlign: 'right' },
  title: {
    fontFamily: TITLE_FONT,
    fontSize: '33px',
    lineHeight: '38px',
    fontWeight: 600,
    letterSpacing: '-0.8px',
    margin: '36px 0 8px',
  },
  piece: { fontSize: '16px', lineHeight: '24px', color: MUTED, margin: '0 0 24px' },
  text: { fontSize: '16px', lineHeight: '25px', margin: '0 0 14px' },
  small: { fontSize: '14px', lineHeight: '21px', color: MUTED, margin: '0 0 8px' },
  heading: { fontSize: '16px', lineHeight: '24px', fontWeight: 700, margin: '30px 0 8px' },
  partingLine: { border: 0, borderTop: `2px solid ${GRAPHITE}`, margin: '30px 0 0', width: '100%' },
  hairline: { border: 0, borderTop: `1px solid ${HAIRLINE}`, margin: '30px 0 22px', width: '100%' },
  turnYours: { backgroundColor: VERDIGRIS_TINT, padding: '16px 22px', margin: '24px 0 0', clipPath: draft(7) },
  turnOther: { borderTop: `1px solid ${HAIRLINE}`, borderBottom: `1px solid ${HAIRLINE}`, padding: '14px 0' },
  turnText: { fontSize: '16px', lineHeight: '24px', margin: 0 },
  button: { ...BUTTON, backgroundColor: GRAPHITE, color: CHALK },
  /** The one act the reader is asked for. */
  buttonMain: { ...BUTTON, backgroundColor: MOLTEN, color: SOOT },
  link: { color: GRAPHITE, textDecoration: 'underline' },
  table: { width: '100%', borderCollapse: 'collapse', fontVariantNumeric: 'tabular-nums' },
  label: {
    textAlign: 'left',
    verticalAlign: 'top',
    fontWeight: 400,
    fontSize: '15px',
    lineHeight: '22px',
    color: MUTED,
    padding: '9px 16px 9px 0',
    borderBottom: `1px solid ${HAIRLINE}`,
    width: '38%',
  },
  value: {
    textAlign: 'left',
    verticalAlign: 'top',
    fontSize: '15px',
    lineHeight: '22px',
    padding: '9px 0',
    borderBottom: `1px solid ${HAIRLINE}`,
  },
  sumLabel: {
    textAlign: 'left',
    verticalAlign: 'top',
    fontWeight: 400,
    fontSize: '15px',
    lineHeight: '22px',
    padding: '9px 16px 9px 0',
    borderBottom: `1px solid ${HAIRLINE}`,
  },
  sum: {
    textAlign: 'right',
    verticalAlign: 'top',
    whiteSpace: 'nowrap',
    fontSize: '15px',
    lineHeight: '22px',
    padding: '9px 0',
    borderBottom: `1px solid ${HAIRLINE}`,
  },
  strong: { fontWeight: 700, color: GRAPHITE },
  faint: { color: MUTED },
  list: { margin: '0 0 14px', padding: '0 0 0 20px' },
  item: { fontSize: '16px', lineHeight: '24px', margin: '0 0 7px' },
  note: { borderLeft: `3px solid ${HAIRLINE}`, padding: '2px 0 2px 16px', margin: '18px 0' },
  picture: { display: 'block', width: '100%', maxWidth: '552px', height: 'auto', border: 0 },
  caption: { fontSize: '14px', lineHeight: '21px', color: MUTED, margin: '7px 0 20px' },
  code: {
    fontSize: '38px',
    lineHeight: '46px',
    fontWeight: 600,
    letterSpacing: '7px',
    fontVariantNumeric: 'tabular-nums',
    margin: '4px 0 6px',
  },
  figure: { fontSize: '30px', lineHeight: '38px', fontWeight: 500, letterSpacing: '-0.5px', margin: '4px 0 2px' },
  fingerprint: { fontFamily: "'Courier New', Courier, monospace", fontSize: '13px', wordBreak: 'break-all' },
});
