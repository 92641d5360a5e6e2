import type { SentFile } from '../acts/deal';

const LINES = [
  'Lenn Valley Museum',
  'Registrar',
  '',
  'Permission to copy',
  '',
  'We own the dagger hilt shaped as a small figure that is shown in our case 4.',
  'Marrowfen Casting House may make one handling copy of it from our scan.',
  'The copy is to be marked for good as a reproduction, with the maker and the year.',
  'The pattern made from our scan serves this copy alone and is returned to us.',
  '',
  'For the museum: A. Quarrow, registrar',
];

/** One page of PDF in the plainest form of ISO 32000-1: five objects, a cross-reference table, a trailer. */
function onePage(lines: readonly string[]): Uint8Array<ArrayBuffer> {
  const escaped = lines.map((line) => line.replace(/[\\()]/g, (sign) => `\\${sign}`));
  const text = `BT /F1 12 Tf 72 760 Td 18 TL ${escaped.map((line) => `(${line}) Tj T*`).join(' ')} ET`;
  const objects = [
    '<< /Type /Catalog /Pages 2 0 R >>',
    '<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
    '<< /Type /Page /Parent 2 0 R /MediaBox [0 0 595 842] /Resources << /Font << /F1 5 0 R >> >> /Contents 4 0 R >>',
    `<< /Length ${text.length} >>\nstream\n${text}\nendstream`,
    '<< /Type /Font /Subtype /Type1 /BaseFont /Times-Roman >>',
  ];
  let body = '%PDF-1.4\n';
  const starts = objects.map((object, index) => {
    const start = body.length;
    body += `${index + 1} 0 obj\n${object}\nendobj\n`;
    return start;
  });
  const table = starts.map((start) => `${String(start).padStart(10, '0')} 00000 n \n`).join('');
  const size = objects.length + 1;
  const end = `xref\n0 ${size}\n0000000000 65535 f \n${table}trailer\n<< /Size ${size} /Root 1 0 R >>\nstartxref\n${body.length}\n%%EOF\n`;
  return new TextEncoder().encode(body + end);
}

/** The museum's letter that its own piece may be copied, as a PDF. */
export function permissionLetter(): SentFile {
  return { name: 'Permission to copy, case 4.pdf', type: 'application/pdf', bytes: onePage(LINES) };
}
