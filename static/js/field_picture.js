// What is painted of the field of hole choices: the car, a mark for each choice, and the chosen ones over them.
const SCALE = ["#00224e", "#3f4b6b", "#7b7a77", "#b9a84a", "#fde737"]; // dark to light, also for colour-blind eyes
export const SHAPES = ["square", "down", "disc", "up", "diamond"];
const SIZE = 3.2; // CSS pixels
const CELL = 1.5;

const colour = (name) => getComputedStyle(document.documentElement).getPropertyValue(name).trim();

function sheet(width, height) {
  return Object.assign(document.createElement("canvas"), { width, height });
}

function path(context, shape, size) {
  context.beginPath();
  if (shape === "disc") context.arc(0, 0, size, 0, 2 * Math.PI);
  else if (shape === "square") context.rect(-0.85 * size, -0.85 * size, 1.7 * size, 1.7 * size);
  else {
    const corners = { up: [[0, -1.1], [1.05, 0.8], [-1.05, 0.8]], down: [[0, 1.1], [1.05, -0.8], [-1.05, -0.8]], diamond: [[0, -1.2], [1.2, 0], [0, 1.2], [-1.2, 0]] }[shape];
    corners.forEach(([x, y], at) => context[at ? "lineTo" : "moveTo"](x * size, y * size));
    context.closePath();
  }
}

// One little picture a class, drawn once and stamped for each choice.
export function stamp(index, size, density) {
  const picture = sheet(Math.ceil(size * 3 * density), Math.ceil(size * 3 * density));
  const context = picture.getContext("2d");
  context.scale(density, density);
  context.translate(1.5 * size, 1.5 * size);
  path(context, SHAPES[index], size);
  context.fillStyle = SCALE[index];
  context.fill();
  context.lineWidth = 0.7;
  context.strokeStyle = colour("--ink");
  context.stroke();
  return picture;
}

export class Picture {
  constructor(canvas, data, values) {
    this.canvas = canvas;
    this.data = data;
    this.xs = values[data.x];
    this.zs = values[data.z];
  }

  // True once the canvas has a size to draw in.
  fit() {
    const density = devicePixelRatio || 1, scene = this.data.scene, wide = this.canvas.clientWidth;
    if (!wide) return false;
    const [left, right, bottom, top] = [-0.45 * scene.wheelbase, 1.25 * scene.wheelbase, -0.12 * scene.wheelbase, 0.52 * scene.wheelbase];
    this.scale = wide / (right - left);
    const tall = (top - bottom) * this.scale;
    this.at = (x, z) => [(x - left) * this.scale, (top - z) * this.scale];
    this.size = [wide, tall];
    this.canvas.width = wide * density;
    this.canvas.height = tall * density;
    this.context = this.canvas.getContext("2d");
    this.context.setTransform(density, 0, 0, density, 0, 0);
    this.stamps = SHAPES.map((_, index) => stamp(index, SIZE, density));
    this.px = Float32Array.from(this.xs, (x) => this.at(x, 0)[0]);
    this.py = Float32Array.from(this.zs, (z) => this.at(0, z)[1]);
    return true;
  }

  inSight(n) {
    return this.px && this.px[n] >= 0 && this.px[n] <= this.size[0] && this.py[n] >= 0 && this.py[n] <= this.size[1];
  }

  // Car and choices are painted when they change; the pointer's way over them only lays the picture down again.
  paint(shown, classes) {
    const { context } = this, [wide, tall] = this.size;
    context.clearRect(0, 0, wide, tall);
    this.drawCar();
    const half = 1.5 * SIZE;
    // Choices lie on each other by the hundred: of those of one class in one small square, one mark is enough.
    const columns = Math.ceil(wide / CELL) + 1, taken = new Uint8Array(SHAPES.length * columns * (Math.ceil(tall / CELL) + 1));
    for (let n = 0; n < shown.length; n++) {
      if (!shown[n] || classes[n] === 255 || !this.inSight(n)) continue;
      const cell = (Math.floor(this.py[n] / CELL) * columns + Math.floor(this.px[n] / CELL)) * SHAPES.length + classes[n];
      if (taken[cell]) continue;
      taken[cell] = 1;
      context.drawImage(this.stamps[classes[n]], this.px[n] - half, this.py[n] - half, 2 * half, 2 * half);
    }
    this.picture = sheet(this.canvas.width, this.canvas.height);
    this.picture.getContext("2d").drawImage(this.canvas, 0, 0);
  }

  draw(chosen, hovered) {
    const { context } = this, [wide, tall] = this.size;
    context.clearRect(0, 0, wide, tall);
    context.drawImage(this.picture, 0, 0, wide, tall);
    this.drawChoice(chosen, colour("--accent"), 3);
    if (hovered !== chosen) this.drawChoice(hovered, colour("--ink"), 1.5);
  }

  line(from, to, ink, width, dash) {
    const { context } = this;
    context.beginPath();
    context.setLineDash(dash || []);
    context.moveTo(...this.at(...from));
    context.lineTo(...this.at(...to));
    context.strokeStyle = ink;
    context.lineWidth = width;
    context.stroke();
    context.setLineDash([]);
  }

  ring(x, z, radius, ink, width) {
    this.context.beginPath();
    this.context.arc(...this.at(x, z), radius, 0, 2 * Math.PI);
    this.context.strokeStyle = ink;
    this.context.lineWidth = width;
    this.context.stroke();
  }

  drawCar() {
    const { wheelbase, rear_radius, front_radius, cg, brackets } = this.data.scene, faint = colour("--faint");
    this.line([-wheelbase, 0], [2 * wheelbase, 0], colour("--ink"), 2);
    this.ring(0, rear_radius, rear_radius * this.scale, faint, 1.4);
    this.ring(wheelbase, front_radius, front_radius * this.scale, faint, 1.4);
    this.line([0, 0], [2 * wheelbase, 2 * cg[1]], colour("--series-1"), 1.5, [14, 5, 3, 5]);
    this.ring(cg[0], cg[1], 7, colour("--ink"), 2);
    for (const holes of Object.values(brackets)) for (const [x, z] of holes) this.ring(x, z, 2, faint, 1);
  }

  drawChoice(n, ink, width) {
    if (n < 0) return;
    const pin = (place) => this.data.scene.brackets[place]?.[this.data.holes[place]?.[n] - 1];
    const centre = [this.xs[n], this.zs[n]];
    for (const [chassis, housing] of [["lower_chassis", "lower_housing"], ["upper_chassis", "upper_housing"]]) {
      if (!pin(chassis) || !pin(housing)) continue;
      this.line(pin(housing), pin(chassis), ink, width + 1);
      if (centre.every(Number.isFinite)) this.line(pin(chassis), centre, ink, 1, [2, 4]);
    }
    if (pin("ladder_chassis")) this.line([0, this.data.scene.rear_radius], pin("ladder_chassis"), ink, width + 1);
    if (centre.every(Number.isFinite)) this.ring(...centre, 9, ink, width);
  }
}
