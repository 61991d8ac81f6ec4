const drawing = require('@napi-rs/canvas/node-canvas.js');

/** node-canvas' `createCanvas`; an SVG canvas hands out its text by `toBuffer`, as node-canvas has it. */
function createCanvas(width, height, type) {
  const canvas = drawing.createCanvas(width, height, type);
  if (type === 'svg') canvas.toBuffer = () => canvas.getContent();
  return canvas;
}

module.exports = { ...drawing, createCanvas };
