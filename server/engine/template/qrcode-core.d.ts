/** The package's own types ask for Node's and the page's; its core needs neither. */
declare module 'qrcode/lib/core/qrcode.js' {
  interface QrSymbol { modules: { size: number; get(row: number, column: number): number } }
  const core: { create(text: string, options: { errorCorrectionLevel: 'L' | 'M' | 'Q' | 'H' }): QrSymbol };
  export default core;
}
