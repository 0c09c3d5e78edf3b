/** A point in the scene, in specimen radii: x along the specimen, y up its visible face, z towards the camera. */
export interface ScenePoint {
  readonly x: number;
  readonly y: number;
  readonly z: number;
}
export interface PixelPoint {
  readonly xPx: number;
  readonly yPx: number;
}

export interface CameraRecipe {
  readonly widthPx: number;
  readonly heightPx: number;
  /** Distance from the middle of the break, specimen radii. */
  readonly distanceR: number;
  readonly focalPx: number;
  /** Angle by which the line of sight to the break leaves the plane square to the axis, degrees. */
  readonly tiltDeg: number;
  /** Turn of the camera round the specimen's axis, degrees. */
  readonly elevationDeg: number;
  /** Turn of the specimen in the picture, degrees, counter-clockwise as seen. */
  readonly rollDeg: number;
  /** Where the middle of the break (the origin) appears. */
  readonly originPx: PixelPoint;
  /** Radial distortion: relative displacement at the corner of the picture. */
  readonly distortion: number;
}

const cross = (a: ScenePoint, b: ScenePoint): ScenePoint => ({
  x: a.y * b.z - a.z * b.y,
  y: a.z * b.x - a.x * b.z,
  z: a.x * b.y - a.y * b.x,
});

/** A perspective camera with radial distortion. Integer pixel = pixel centre, y of pixels grows down. */
export class Camera {
  readonly recipe: CameraRecipe;
  readonly position: ScenePoint;
  readonly right: ScenePoint;
  readonly up: ScenePoint;
  readonly forward: ScenePoint;
  readonly centreX: number;
  readonly centreY: number;
  private readonly perSquarePx: number;

  constructor(recipe: CameraRecipe) {
    this.recipe = recipe;
    this.centreX = (recipe.widthPx - 1) / 2;
    this.centreY = (recipe.heightPx - 1) / 2;
    this.perSquarePx = recipe.distortion / (this.centreX ** 2 + this.centreY ** 2);
    // The camera is turned about y until the line of sight to the break has the wanted tilt.
    let turn = 0;
    let axes = orientation(turn, recipe.elevationDeg, recipe.rollDeg);
    let sight = this.direction(axes, recipe.originPx);
    for (let step = 0; step < 12; step++) {
      turn += Math.asin(Math.sin((recipe.tiltDeg * Math.PI) / 180)) - Math.asin(sight.x);
      axes = orientation(turn, recipe.elevationDeg, recipe.rollDeg);
      sight = this.direction(axes, recipe.originPx);
    }
    this.right = axes.right;
    this.up = axes.up;
    this.forward = axes.forward;
    const away = -recipe.distanceR;
    this.position = { x: away * sight.x, y: away * sight.y, z: away * sight.z };
  }

  private direction(axes: Axes, at: PixelPoint): ScenePoint {
    const { focalPx } = this.recipe;
    const dx = at.xPx - this.centreX;
    const dy = at.yPx - this.centreY;
    const stretch = 1 + this.perSquarePx * (dx * dx + dy * dy);
    const a = (dx * stretch) / focalPx;
    const b = (-dy * stretch) / focalPx;
    const x = axes.forward.x + a * axes.right.x + b * axes.up.x;
    const y = axes.forward.y + a * axes.right.y + b * axes.up.y;
    const z = axes.forward.z + a * axes.right.z + b * axes.up.z;
    const length = Math.hypot(x, y, z);
    return { x: x / length, y: y / length, z: z / length };
  }

  /** Writes the unit direction of the ray through a pixel to `out[0..2]`. */
  ray(xPx: number, yPx: number, out: Float64Array): void {
    const dx = xPx - this.centreX;
    const dy = yPx - this.centreY;
    const stretch = (1 + this.perSquarePx * (dx * dx + dy * dy)) / this.recipe.focalPx;
    const a = dx * stretch;
    const b = -dy * stretch;
    const x = this.forward.x + a * this.right.x + b * this.up.x;
    const y = this.forward.y + a * this.right.y + b * this.up.y;
    const z = this.forward.z + a * this.right.z + b * this.up.z;
    const scale = 1 / Math.sqrt(x * x + y * y + z * z);
    out[0] = x * scale;
    out[1] = y * scale;
    out[2] = z * scale;
  }

  /** Where a point of the scene appears; NaN behind the camera. */
  project(point: ScenePoint): PixelPoint {
    const x = point.x - this.position.x;
    const y = point.y - this.position.y;
    const z = point.z - this.position.z;
    const depth = x * this.forward.x + y * this.forward.y + z * this.forward.z;
    if (depth <= 0) return { xPx: Number.NaN, yPx: Number.NaN };
    const scale = this.recipe.focalPx / depth;
    const u = scale * (x * this.right.x + y * this.right.y + z * this.right.z);
    const v = -scale * (x * this.up.x + y * this.up.y + z * this.up.z);
    // Distortion is stated from the picture to the ray; here it is undone by iteration.
    let du = u;
    let dv = v;
    for (let step = 0; step < 8; step++) {
      const stretch = 1 + this.perSquarePx * (du * du + dv * dv);
      du = u / stretch;
      dv = v / stretch;
    }
    return { xPx: this.centreX + du, yPx: this.centreY + dv };
  }

  /** Size of a pixel at a distance from the camera, radii. */
  pixelSizeR(distanceR: number): number {
    return distanceR / this.recipe.focalPx;
  }
}

interface Axes {
  readonly right: ScenePoint;
  readonly up: ScenePoint;
  readonly forward: ScenePoint;
}

function orientation(turnRad: number, elevationDeg: number, rollDeg: number): Axes {
  const roll = (rollDeg * Math.PI) / 180;
  const elevation = (elevationDeg * Math.PI) / 180;
  const place = ({ x, y, z }: ScenePoint): ScenePoint => {
    const y1 = y * Math.cos(elevation) - z * Math.sin(elevation);
    const z1 = y * Math.sin(elevation) + z * Math.cos(elevation);
    return {
      x: x * Math.cos(turnRad) - z1 * Math.sin(turnRad),
      y: y1,
      z: x * Math.sin(turnRad) + z1 * Math.cos(turnRad),
    };
  };
  // The specimen appears turned counter-clockwise by `roll` when the camera turns clockwise.
  const right = place({ x: Math.cos(roll), y: -Math.sin(roll), z: 0 });
  const up = place({ x: Math.sin(roll), y: Math.cos(roll), z: 0 });
  const back = cross(right, up);
  return { right, up, forward: { x: -back.x, y: -back.y, z: -back.z } };
}
