import sharp from "sharp";

/**
 * A picture for the demo, drawn here and labelled as such: a sheet of paper with a sketched case and the caption.
 * Nobody is to take it for a photo of a real unit.
 */
export async function drawPicture(caption: string, tint: number): Promise<Buffer> {
  const hue = (tint * 47) % 360;
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="1200" height="900">
    <rect width="1200" height="900" fill="hsl(${hue} 22% 88%)"/>
    <g fill="none" stroke="hsl(${hue} 30% 32%)" stroke-width="6">
      <rect x="220" y="210" width="760" height="420" rx="24"/>
      <circle cx="360" cy="420" r="70"/><circle cx="360" cy="420" r="22"/>
      <rect x="480" y="330" width="180" height="180"/>
      <path d="M720 350h190M720 420h190M720 490h190"/>
      <path d="M980 560c120 0 60 170 180 170"/>
    </g>
    <rect y="770" width="1200" height="130" fill="hsl(${hue} 30% 24%)"/>
    <text x="40" y="825" font-family="sans-serif" font-size="40" fill="#ffffff">${escapeXml(caption)}</text>
    <text x="40" y="875" font-family="sans-serif" font-size="30" fill="#ffffff">Demo picture, drawn for the demo workshop. No real unit.</text>
  </svg>`;
  return sharp(Buffer.from(svg)).jpeg({ quality: 80 }).toBuffer();
}

function escapeXml(text: string): string {
  return text.replace(/[&<>]/g, (character) => `&#${character.charCodeAt(0)};`);
}
