import type { Quantity } from '../units.ts';

/** A column of the canonical test log; one row of the log is one test. */
export interface LogColumn {
  /** Canonical header. */
  readonly name: string;
  /** What the column is called without its unit, for messages. */
  readonly label: string;
  readonly quantity: Quantity | null;
  readonly required: boolean;
  /**
   * Other names laboratories use, in English, German, French, Spanish, Italian, Portuguese, Polish, Swedish, Chinese and
   * Japanese; compared after `foldHeader`. Trade usage, collected by common practice. `name=unit` implies the unit.
   */
  readonly aliases: readonly string[];
}

const words = (text: string): string[] =>
  text
    .split(/[,\n]/)
    .map((word) => word.trim())
    .filter(Boolean);

const column = <const N extends string>(
  name: N,
  label: string,
  quantity: Quantity | null,
  aliases: string,
  required = false,
): LogColumn & { readonly name: N } => ({ name, label, quantity, aliases: words(aliases), required });

/** Every column the import understands, in the order a canonical log has them. */
export const LOG_COLUMNS = [
  column(
    'specimen_id',
    'specimen id',
    null,
    `specimen, specimen no, specimen number, specimen name, sample, sample id, sample no, sample number, id, test id, test piece,
     test piece no, Probe, Proben-Nr, Proben-ID, Probennummer, Probenbezeichnung, Prüfling, éprouvette, n° éprouvette,
     numéro éprouvette, échantillon, repère, probeta, id probeta, n.º probeta, número de probeta, muestra, provino, provetta,
     numero provino, campione, corpo de prova, provete, amostra, próbka, numer próbki, provstav, prov nr, 试样, 试样编号, 样品编号,
     試験片, 試験片番号`,
    true,
  ),
  column(
    'test_date',
    'test date',
    null,
    `date, date of test, tested on, Datum, Prüfdatum, date d'essai, date essai, date de l'essai, fecha, fecha de ensayo,
     fecha ensayo, data, data prova, data della prova, data do ensaio, data ensaio, data badania, provdatum, 日期, 试验日期, 試験日`,
  ),
  column('material', 'material', null, 'grade, alloy, Werkstoff, matériau, nuance, materiale, materiał, 材料, 材質'),
  column(
    'heat',
    'heat',
    null,
    `heat no, heat number, batch, batch no, lot, lot no, melt, cast, Charge, Chargennummer, Chargen-Nr, Schmelze, coulée,
     n° coulée, colada, lote, colata, lotto, corrida, wytop, charge nr, 炉号, 批号, ロット, 溶解番号`,
  ),
  column(
    'section',
    'section',
    null,
    'cross section, Querschnitt, Querschnittsform, sección, sezione, seção, secção, przekrój, tvärsnitt, 截面, 断面',
  ),
  column(
    'diameter_mm',
    'diameter',
    'length',
    `diameter, dia, d, d0, ø, ⌀, od, outside diameter, outer diameter, gauge diameter, gage diameter, Durchmesser, Außendurchmesser,
     diamètre, diamètre extérieur, diámetro, diámetro exterior, diametro, diametro esterno, diâmetro, diâmetro externo, średnica,
     ytterdiameter, 直径, 外径`,
  ),
  column(
    'bore_mm',
    'bore',
    'length',
    `bore, bore diameter, inside diameter, inner diameter, Innendurchmesser, Bohrung, alésage, diamètre intérieur, diámetro interior,
     diametro interno, diâmetro interno, średnica wewnętrzna, innerdiameter, 内径`,
  ),
  column(
    'side_mm',
    'side',
    'length',
    'side, side length, edge, Kantenlänge, Seitenlänge, côté, lado, lato, bok, 边长, 一辺',
  ),
  column(
    'width_mm',
    'width',
    'length',
    'Breite, largeur, ancho, anchura, larghezza, largura, szerokość, bredd, 宽度, 幅',
  ),
  column('height_mm', 'height', 'length', 'height, Höhe, hauteur, altura, altezza, wysokość, höjd, 高度, 高さ'),
  column(
    'wall_mm',
    'wall',
    'length',
    `wall, wall thickness, Wanddicke, Wandstärke, épaisseur de paroi, espesor de pared, spessore parete, espessura da parede,
     grubość ścianki, godstjocklek, 壁厚, 肉厚`,
  ),
  column(
    'major_axis_mm',
    'major axis',
    'length',
    'major axis, große Achse, grand axe, eje mayor, asse maggiore, eixo maior, 长轴, 長径',
  ),
  column(
    'minor_axis_mm',
    'minor axis',
    'length',
    'minor axis, kleine Achse, petit axe, eje menor, asse minore, eixo menor, 短轴, 短径',
  ),
  column(
    'across_flats_mm',
    'distance across flats',
    'length',
    'across flats, width across flats, distance across flats, Schlüsselweite, sur plats, entre caras, chiave, 对边, 二面幅',
  ),
  column(
    'gauge_length_mm',
    'gauge length',
    'length',
    `gauge length, gage length, l0, parallel length, free length, Messlänge, Anfangsmesslänge, freie Länge, longueur utile,
     longueur de base, longitud calibrada, longitud útil, lunghezza utile, comprimento útil, długość pomiarowa, mätlängd, 标距, 標点距離`,
  ),
  column(
    'torque_max_Nm',
    'largest torque',
    'torque',
    `torque max, torque, max torque, maximum torque, peak torque, largest torque, Drehmoment, max Drehmoment, Drehmoment max,
     maximales Drehmoment, größtes Drehmoment, Torsionsmoment, couple, couple max, couple maximal, moment de torsion, par, par máximo,
     par de torsión, momento torsor, coppia, coppia massima, momento torcente, torque máximo, momento de torção, moment skręcający,
     vridmoment, 扭矩, 最大扭矩, トルク, 最大トルク`,
  ),
  column(
    'torque_direction',
    'torque direction',
    null,
    `direction, direction of torque, direction of twist, sense, Drehrichtung, Drehsinn, sens, sens de rotation, sens du couple, sentido,
     sentido de giro, verso, senso di rotazione, sentido de rotação, kierunek, vridriktning, 扭转方向, 方向, 回転方向`,
  ),
  column(
    'twist_fracture_deg',
    'twist at fracture',
    'angle',
    `twist fracture, twist, twist at fracture, twist to failure, twist at failure, angle of twist, twist angle, turns=turns,
     turns to fracture=turns, turns to failure=turns, number of turns=turns, Verdrehwinkel, Bruchverdrehwinkel, Verdrehung,
     Verwindezahl=turns, angle de torsion, nombre de tours=turns, ángulo de torsión, número de vueltas=turns, angolo di torsione,
     numero di giri=turns, ângulo de torção, kąt skręcenia, vridningsvinkel, 扭转角, ねじり角`,
  ),
  column(
    'axial_force_N',
    'axial force',
    'force',
    'axial force, axial load, Axialkraft, Längskraft, force axiale, fuerza axial, forza assiale, força axial, siła osiowa, axialkraft, 轴向力, 軸力',
  ),
  column(
    'bending_moment_Nm',
    'bending moment',
    'torque',
    `bending moment, Biegemoment, moment de flexion, moment fléchissant, momento flector, momento flettente, momento fletor,
     moment gnący, böjmoment, 弯矩, 曲げモーメント`,
  ),
  column(
    'angle_deg',
    'plane angle',
    'angle',
    `angle, plane angle, fracture angle, fracture plane angle, break angle, Bruchwinkel, Bruchebenenwinkel, angle de rupture,
     ángulo de rotura, ángulo de fractura, angolo di rottura, angolo di frattura, ângulo de fratura, ângulo de ruptura, kąt przełomu,
     brottvinkel, 断口角度, 破断角`,
  ),
  // Only names that say "standard": "angle uncertainty" alone may as well be an expanded one.
  column(
    'angle_u_deg',
    'standard uncertainty of the plane angle',
    'angle',
    `angle u, u angle, u(angle), angle standard uncertainty, standard uncertainty of angle, Winkel Standardunsicherheit,
     Standardunsicherheit, incertitude-type, incertitude type, incertidumbre típica, incertezza tipo, incerteza padrão`,
  ),
  column(
    'photo',
    'photo',
    null,
    `photos, photo file, picture, image, image file, file, Foto, Fotos, Bild, Bilddatei, photographie, fichier photo, imagen,
     fotografía, immagine, imagem, zdjęcie, 照片, 写真`,
  ),
  column(
    'operator',
    'operator',
    null,
    'technician, tester, tested by, Prüfer, Bediener, opérateur, operador, operatore, 操作员, 試験者',
  ),
  column(
    'remarks',
    'remarks',
    null,
    `remark, comment, comments, note, notes, Bemerkung, Bemerkungen, Anmerkung, remarque, remarques, observations, commentaire,
     observaciones, notas, osservazioni, observações, uwagi, anmärkning, 备注, 備考`,
  ),
] as const;

export type ColumnName = (typeof LOG_COLUMNS)[number]['name'];

/** The headers of a canonical log, in order. */
export const CANONICAL_HEADERS: readonly ColumnName[] = LOG_COLUMNS.map((c) => c.name);

const byName = new Map<string, LogColumn>(LOG_COLUMNS.map((c) => [c.name, c]));

/** A column by its canonical name. */
export function logColumn(name: ColumnName): LogColumn {
  const found = byName.get(name);
  if (!found) throw new Error(`no column ${name}`);
  return found;
}

/** Reason columns that the CSV of refused rows carries; ignored when the mended file is imported again. */
export const REASON_HEADERS = ['refused_line', 'refused_column', 'refused_code', 'refused_reason'] as const;
