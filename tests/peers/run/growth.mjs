/** The growth curve: time against order, both on logarithmic scales, as SVG. */

const WIDTH = 640;
const HEIGHT = 420;
const MARGIN = { left: 64, right: 150, top: 20, bottom: 44 };
/** Marks tell the lines apart without colour. */
const MARKS = ['\u25cf', '\u25cb', '\u25b2', '\u25a0', '\u25c6'];

const log = Math.log10;

function scale(low, high, from, to) {
  return (value) => from + ((log(value) - log(low)) / (log(high) - log(low))) * (to - from);
}

function decades(low, high) {
  const marks = [];
  for (let power = Math.ceil(log(low)); power <= Math.floor(log(high)); power += 1) marks.push(10 ** power);
  return marks;
}

/** Least squares slope of log time over log order, from order 50 on. */
export function growthExponent(points) {
  const large = points.filter(([order]) => order >= 50).map(([order, time]) => [log(order), log(time)]);
  const mean = (index) => large.reduce((sum, point) => sum + point[index], 0) / large.length;
  const [x, y] = [mean(0), mean(1)];
  const covariance = large.reduce((sum, point) => sum + (point[0] - x) * (point[1] - y), 0);
  const variance = large.reduce((sum, point) => sum + (point[0] - x) ** 2, 0);
  return covariance / variance;
}

export function growthCurve(rows, names) {
  const real = rows.filter(({ field }) => field === 'real');
  const lines = names.map((name) => ({
    name,
    points: real.filter(({ cells }) => cells[name]).map(({ order, cells }) => [order, cells[name].milliseconds]),
  }));
  const times = lines.flatMap(({ points }) => points.map(([, time]) => time));
  const orders = real.map(({ order }) => order);
  const [low, high] = [Math.min(...times) / 1.5, Math.max(...times) * 1.5];
  const x = scale(Math.min(...orders), Math.max(...orders), MARGIN.left, WIDTH - MARGIN.right);
  const y = scale(low, high, HEIGHT - MARGIN.bottom, MARGIN.top);
  const parts = [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH} ${HEIGHT}" font-family="sans-serif" font-size="12">`,
    `<title>Time with vectors against order, real symmetric</title>`,
    `<rect width="${WIDTH}" height="${HEIGHT}" fill="#fff"/>`,
  ];
  for (const mark of decades(low, high)) {
    const place = y(mark).toFixed(1);
    parts.push(
      `<path d="M${MARGIN.left} ${place}H${WIDTH - MARGIN.right}" stroke="#ddd"/>`,
      `<text x="${MARGIN.left - 6}" y="${place}" dy="4" text-anchor="end">${mark} ms</text>`,
    );
  }
  for (const order of orders) {
    parts.push(`<text x="${x(order).toFixed(1)}" y="${HEIGHT - MARGIN.bottom + 18}" text-anchor="middle">${order}</text>`);
  }
  parts.push(`<text x="${(MARGIN.left + WIDTH - MARGIN.right) / 2}" y="${HEIGHT - 8}" text-anchor="middle">order</text>`);
  lines.forEach(({ name, points }, index) => {
    const ink = index === 0 ? '#1c4e80' : '#555';
    const places = points.map(([order, time]) => [x(order).toFixed(1), y(time).toFixed(1)]);
    parts.push(`<polyline points="${places.map((place) => place.join(',')).join(' ')}" fill="none" stroke="${ink}"/>`);
    for (const [left, top] of places) {
      parts.push(`<text x="${left}" y="${top}" dy="4" text-anchor="middle" fill="${ink}">${MARKS[index]}</text>`);
    }
    const exponent = growthExponent(points).toFixed(1);
    parts.push(
      `<text x="${WIDTH - MARGIN.right + 12}" y="${MARGIN.top + 18 + 18 * index}" fill="${ink}">` +
        `${MARKS[index]} ${name}, n^${exponent}</text>`,
    );
  });
  return `${parts.join('\n')}\n</svg>\n`;
}
