/** Stress at the surface point looked at, MPa; tension positive, tau signed like the torque. */
export interface SurfaceStress {
  /** Along the axis. */
  readonly sigmaXMPa: number;
  /** Along the circumference (hoop). */
  readonly sigmaYMPa: number;
  readonly tauMPa: number;
}

/** The predicted planes that the cells of the decision rule belong to. */
export type PredictedPlaneName = 'tension' | 'compression' | 'shear-transverse' | 'shear-longitudinal';

/** A plane on which normal or shear stress peaks, with both stresses on it. */
export interface PredictedPlane {
  readonly plane: PredictedPlaneName;
  readonly planeAngleDeg: number;
  readonly normalStressMPa: number;
  readonly shearStressMPa: number;
}
