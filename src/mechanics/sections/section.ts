/**
 * What the mechanics need to know about a cross-section, computed from its dimensions.
 * One file a section gives these from its geometry; `registry.ts` lists them.
 */
export interface SectionProperties {
  /** Area of the cross-section, mm². */
  readonly areaMm2: number;
  /** Torsion constant K of φ = T L / (G K), mm⁴; the polar second moment of area J for round sections. */
  readonly torsionConstantMm4: number;
  /** Elastic torsion section modulus W of τ = T / W at the point of largest shear stress, mm³. */
  readonly torsionSectionModulusMm3: number;
  /** Plastic torsion modulus W_p of T_p = τ_y W_p when the whole section has yielded, mm³. */
  readonly plasticTorsionModulusMm3: number;
  /**
   * Lever ρ of the surface shear strain γ = ρ φ / L, mm: the outer radius of a round section, K/W of any other, where
   * it is exact while the bar is elastic and an estimate beyond.
   */
  readonly shearStrainLeverMm: number;
  /**
   * Elastic bending section modulus of σ = M / W_b, mm³, where the largest shear stress sits, for a moment that
   * stretches that place most: the outermost fibre of a round bar, the middle of the long side of a rectangle.
   */
  readonly bendingSectionModulusMm3: number;
  /** Where the largest shear stress sits, in words. */
  readonly largestShearAt: string;
}
