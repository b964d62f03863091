import QRCode from "qrcode";

const QUIET_ZONE = 4;

/** The square an authenticator scans (ISO/IEC 18004, level M, quiet zone of four modules), as one SVG path. */
export function squareOf(text: string): { qrPath: string; qrSize: number } {
  const { modules } = QRCode.create(text, { errorCorrectionLevel: "M" });
  let qrPath = "";
  for (let row = 0; row < modules.size; row++) {
    for (let column = 0; column < modules.size; column++) {
      if (modules.get(row, column)) qrPath += `M${column + QUIET_ZONE} ${row + QUIET_ZONE}h1v1h-1z`;
    }
  }
  return { qrPath, qrSize: modules.size + 2 * QUIET_ZONE };
}
