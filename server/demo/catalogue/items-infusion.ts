import type { ItemRow } from './item-row.ts'

// One item, one line.
// prettier-ignore
export const infusion: Record<string, ItemRow[]> = {
  Infusion: [
    ['IN-001', 'Infusion set, pump', 'Set, infusion, for volumetric pump, 260 cm, sterile', 'each', 'box/40', 'V', 'FEN', 2.3, 1460, 'B1 5.5 n, H1 2.5 p'],
    ['IN-002', 'Infusion set, gravity', 'Set, infusion, gravity, 180 cm, sterile', 'each', 'box/50', 'E', 'CS', 0.78, 1460, 'B1 5.8 n, R1 4.4 w'],
    ['IN-003', 'Blood giving set', 'Set, transfusion, 200 µm filter, sterile', 'each', 'box/25', 'V', 'CS', 1.6, 1460, 'B1 1.3 n, C1 1.9 n'],
    ['IN-010', 'Extension set 15 cm', 'Set, extension, 15 cm, with clamp, sterile', 'each', 'box/50', 'E', 'CS', 0.85, 1460, 'A1 6.2 n, E1 13 n'],
    ['IN-011', 'Extension set 150 cm', 'Set, extension, narrow bore, 150 cm, for syringe driver', 'each', 'box/50', 'E', 'FEN', 1.1, 1460, 'C1 12 n, R1 2 w'],
    ['IN-012', 'Extension set, epidural', 'Set, extension, epidural, yellow stripe, 150 cm', 'each', 'box/25', 'E', 'FEN', 2.9, 1460, 'C1 1 p, R1 1.1 w'],
    ['IN-020', 'Three-way tap', 'Tap, three way, 360°, sterile', 'each', 'box/50', 'E', 'CS', 0.47, 1460, 'C1 13 n, R1 5 w'],
    ['IN-021', 'Manifold, five taps', 'Manifold with five taps, sterile', 'each', 'box/20', 'D', 'FEN', 5.4, 1460, 'C1 0.7 p'],
    ['IN-030', 'Pressure bag 500 ml', 'Bag, pressure infusor, 500 ml, with gauge', 'each', 'box/5', 'E', 'FEN', 9.8, 0, 'C2 0.25 p, E1 0.12 p'],
    ['IN-031', 'Transducer set', 'Set, pressure transducer, single line, 150 cm', 'set', 'box/10', 'V', 'FEN', 12.4, 1460, 'C1 2.1 n'],
    ['IN-040', 'Fluid warming set', 'Set for blood and fluid warmer, disposable', 'set', 'box/10', 'E', 'FEN', 14.2, 1460, 'E1 0.4 n, R1 0.7 w'],
    ['IN-050', 'Infusion label roll', 'Label, drug additive, blank, roll of 500', 'roll', 'box/12', 'D', 'CS', 3.9, 0, 'C1 0.15 p'],
  ],
  Fluids: [
    ['FL-001', 'Saline 0.9 % 1000 ml', 'Sodium chloride 0.9 % infusion, 1000 ml bag', 'bag', 'case/10', 'V', 'TAR', 1.2, 730, 'A1 5.5 n, B1 6.2 n'],
    ['FL-002', 'Saline 0.9 % 500 ml', 'Sodium chloride 0.9 % infusion, 500 ml bag', 'bag', 'case/20', 'E', 'TAR', 0.95, 730, 'A1 4.6 n, C1 6.5 n'],
    ['FL-010', 'Glucose 5 % 500 ml', 'Glucose 5 % infusion, 500 ml bag', 'bag', 'case/20', 'E', 'TAR', 1.0, 730, 'A1 1.9 n, C1 2.4 n'],
    ['FL-003', 'Saline 0.9 % 100 ml', 'Sodium chloride 0.9 % infusion, 100 ml bag', 'bag', 'case/60', 'E', 'TAR', 0.7, 730, 'A1 9 n, B1 8 n'],
    ['FL-011', 'Glucose 5 % 1000 ml', 'Glucose 5 % infusion, 1000 ml bag', 'bag', 'case/10', 'D', 'TAR', 1.25, 730, 'B1 0.8 n, E1 0.5 p'],
    ['FL-020', 'Balanced salt 1000 ml', 'Compound sodium lactate infusion, 1000 ml bag', 'bag', 'case/10', 'V', 'TAR', 1.35, 730, 'R1 5.4 w, C1 4.2 n'],
    ['FL-030', 'Water for irrigation 1000 ml', 'Water, sterile, for irrigation, 1000 ml bottle', 'bottle', 'case/12', 'E', 'TAR', 1.1, 1095, 'A2 1.4 p, B1 1.8 p'],
    ['FL-031', 'Saline for irrigation 1000 ml', 'Sodium chloride 0.9 % for irrigation, 1000 ml bottle', 'bottle', 'case/12', 'E', 'TAR', 1.15, 1095, 'B1 1.6 n, R1 5 w'],
    ['FL-040', 'Saline flush 10 ml', 'Syringe, prefilled, sodium chloride 0.9 %, 10 ml', 'each', 'box/30', 'E', 'TAR', 0.48, 730, 'B1 12 n, H1 8 n'],
    ['FL-041', 'Saline pod 20 ml', 'Sodium chloride 0.9 %, sterile, for wound cleaning, 20 ml pod', 'each', 'box/25', 'D', 'TAR', 0.24, 1095, 'A2 6.5 w, H1 2.6 p'],
    ['FL-042', 'Water for humidifier 500 ml', 'Water, sterile, for humidifier, 500 ml bottle', 'bottle', 'case/15', 'E', 'TAR', 1.3, 1095, 'C1 2.4 n'],
  ],
  Feeding: [
    ['FE-008', 'Feeding tube 8 Fr', 'Tube, nasogastric, feeding, 8 Fr × 110 cm, with guide wire', 'each', 'box/10', 'E', 'FEN', 6.9, 1095, 'A1 0.35 p, C1 0.7 p'],
    ['FE-006', 'Feeding tube 6 Fr', 'Tube, nasogastric, feeding, 6 Fr × 85 cm, child', 'each', 'box/10', 'V', 'FEN', 5.8, 1095, 'H1 0.5 n'],
    ['FE-012', 'Drainage tube 12 Fr, gastric', 'Tube, nasogastric, drainage, 12 Fr × 120 cm', 'each', 'box/20', 'E', 'CS', 1.7, 1095, 'B1 0.5 n'],
    ['FE-020', 'Feeding pump set', 'Set, giving, enteral, for feeding pump', 'each', 'box/30', 'E', 'FEN', 2.6, 1095, 'C1 4.6 n, H1 1.2 p'],
    ['FE-030', 'pH strip', 'Indicator strip, pH 0–6, for gastric aspirate', 'tub', 'box/6', 'E', 'MAR', 7.2, 730, 'A1 0.2 p, C1 0.3 p'],
    ['FE-040', 'Beaker with spout', 'Beaker, feeding, with spout, 250 ml, disposable', 'each', 'case/200', 'D', 'CS', 0.13, 0, 'A1 6 n'],
  ],
}
