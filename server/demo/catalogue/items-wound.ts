import type { ItemRow } from './item-row.ts'

// One item, one line.
// prettier-ignore
export const wound: Record<string, ItemRow[]> = {
  Dressings: [
    ['DR-001', 'Gauze swab 10 × 10 cm', 'Swab, gauze, 10 × 10 cm, 8 ply, sterile, pack of 5', 'pack', 'box/50', 'E', 'CS', 0.17, 1825, 'B1 16 n, H1 4.2 p'],
    ['DR-002', 'Gauze swab, X-ray 10 × 10', 'Swab, gauze, X-ray detectable, 10 × 10 cm, pack of 5', 'pack', 'case/100', 'E', 'CS', 0.31, 1825, 'R1 26 w'],
    ['DR-010', 'Film dressing 6 × 7 cm', 'Dressing, film, 6 × 7 cm, sterile', 'each', 'box/100', 'D', 'CS', 0.26, 1095, 'A2 4 w, H1 2 p'],
    ['DR-011', 'Film dressing 10 × 12 cm', 'Dressing, film, 10 × 12 cm, sterile', 'each', 'box/50', 'E', 'CS', 0.48, 1095, 'A1 3.6 n, B1 5.6 n'],
    ['DR-012', 'Film and pad 9 × 15 cm', 'Dressing, film with pad, 9 × 15 cm, sterile', 'each', 'box/50', 'E', 'CS', 0.62, 1095, 'B1 6.4 n, R1 5.5 w'],
    ['DR-020', 'Foam dressing 10 × 10 cm', 'Dressing, foam, silicone border, 10 × 10 cm', 'each', 'box/10', 'E', 'FEN', 2.4, 1095, 'B1 2 n, A2 1.8 w'],
    ['DR-021', 'Foam dressing, heel', 'Dressing, foam, silicone border, heel', 'each', 'box/5', 'D', 'FEN', 7.2, 1095, 'A1 0.7 n'],
    ['DR-022', 'Foam dressing, sacrum', 'Dressing, foam, silicone border, sacrum, 18 × 18 cm', 'each', 'box/10', 'E', 'FEN', 6.6, 1095, 'C1 1.2 n, A1 0.8 n'],
    ['DR-030', 'Alginate dressing 10 × 20 cm', 'Dressing, alginate, 10 × 20 cm, sterile', 'each', 'box/5', 'D', 'FEN', 4.6, 1095, 'A2 0.45 p, B1 0.4 n'],
    ['DR-031', 'Hydrogel 15 g', 'Gel, hydrogel, for wound, 15 g', 'tube', 'box/10', 'D', 'FEN', 2.1, 730, 'A2 0.3 p'],
    ['DR-040', 'Low-adherent dressing 10 × 10', 'Dressing, low adherent, absorbent, 10 × 10 cm', 'each', 'box/100', 'D', 'CS', 0.19, 1825, 'A2 3.4 w, E1 5.2 n'],
    ['DR-050', 'Dressing pack', 'Pack, dressing procedure, with apron and tray', 'pack', 'case/60', 'E', 'CS', 0.94, 1825, 'B1 8.5 n, A2 4.6 w'],
    ['DR-060', 'Negative pressure dressing M', 'Dressing kit, negative pressure, medium', 'set', 'box/5', 'E', 'MAR', 27, 730, 'B1 0.35 l'],
    ['DR-061', 'Negative pressure canister 300 ml', 'Canister, negative pressure, 300 ml', 'each', 'box/10', 'E', 'MAR', 19, 1095, 'B1 0.5 n'],
    ['DR-070', 'Burns dressing 20 × 30 cm', 'Dressing, burns, gel, 20 × 30 cm', 'each', 'box/10', 'E', 'MAR', 8.4, 730, 'E1 0.4 l'],
    ['DR-080', 'Eye pad', 'Pad, eye, oval, sterile', 'each', 'box/25', 'D', 'CS', 0.22, 1825, 'E1 0.9 n'],
  ],
  'Bandages and tape': [
    ['BA-001', 'Tape 2.5 cm', 'Tape, microporous, 2.5 cm × 9 m', 'roll', 'box/12', 'D', 'CS', 0.68, 1825, 'B1 1.3 n, C1 1 p'],
    ['BA-002', 'Tape, silicone 2.5 cm', 'Tape, silicone, gentle, 2.5 cm × 5 m', 'roll', 'box/12', 'D', 'FEN', 2.9, 1095, 'H1 0.6 p'],
    ['BA-010', 'Crêpe bandage 10 cm', 'Bandage, crêpe, 10 cm × 4.5 m', 'roll', 'box/12', 'D', 'CS', 0.95, 1825, 'A2 1.2 w, E1 2.4 n'],
    ['BA-011', 'Conforming bandage 7.5 cm', 'Bandage, conforming, 7.5 cm × 4 m', 'roll', 'box/20', 'D', 'CS', 0.28, 1825, 'A2 2.1 w, H1 0.9 p'],
    ['BA-020', 'Plaster of Paris 10 cm', 'Bandage, plaster of Paris, 10 cm × 2.7 m', 'roll', 'box/12', 'E', 'MAR', 1.7, 1095, 'E1 2.6 n'],
    ['BA-021', 'Casting tape 7.5 cm', 'Tape, synthetic cast, 7.5 cm × 3.6 m', 'roll', 'box/10', 'D', 'MAR', 5.4, 900, 'E1 0.9 n'],
    ['BA-022', 'Undercast padding 10 cm', 'Padding, undercast, 10 cm × 2.7 m', 'roll', 'bag/12', 'D', 'CS', 0.5, 0, 'E1 3.1 n'],
    ['BA-030', 'Triangular bandage', 'Bandage, triangular, calico', 'each', 'bag/12', 'D', 'CS', 0.62, 0, 'E1 1.2 n'],
  ],
  'Sutures and closure': [
    ['SC-010', 'Suture 3-0 nylon', 'Suture, polyamide, monofilament, 3-0, 45 cm, cutting needle', 'each', 'box/36', 'E', 'FEN', 2.2, 1825, 'E1 2.8 n, R1 2.4 w'],
    ['SC-011', 'Suture 4-0 nylon', 'Suture, polyamide, monofilament, 4-0, 45 cm, cutting needle', 'each', 'box/36', 'E', 'FEN', 2.2, 1825, 'E1 2.2 n'],
    ['SC-020', 'Suture 2-0 absorbable', 'Suture, polyglactin, braided, 2-0, 75 cm, round needle', 'each', 'box/36', 'E', 'FEN', 2.9, 1460, 'R1 6.5 w'],
    ['SC-021', 'Suture 0 absorbable loop', 'Suture, polydioxanone, loop, 0, 150 cm', 'each', 'box/24', 'E', 'FEN', 6.4, 1460, 'R1 2.2 w'],
    ['SC-030', 'Skin stapler 35', 'Stapler, skin, 35 wide staples', 'each', 'box/6', 'E', 'FEN', 7.9, 1460, 'R1 1.6 w'],
    ['SC-031', 'Staple remover', 'Remover, skin staple, sterile', 'each', 'box/12', 'D', 'FEN', 1.4, 1825, 'A2 0.6 w, B1 0.7 n'],
    ['SC-040', 'Skin glue 0.5 ml', 'Adhesive, tissue, topical, 0.5 ml', 'each', 'box/12', 'E', 'FEN', 8.6, 540, 'E1 1 n, H1 0.35 p'],
    ['SC-041', 'Wound strip 6 × 75 mm', 'Strip, wound closure, 6 × 75 mm, packet of 3', 'pack', 'box/50', 'D', 'CS', 0.44, 1825, 'E1 3.2 n, H1 0.7 p'],
    ['SC-050', 'Suture pack, minor', 'Pack, suturing, minor, with instruments', 'pack', 'case/20', 'E', 'FEN', 5.9, 1460, 'E1 3.2 n'],
  ],
  Drains: [
    ['DN-010', 'Chest drain set 24 Ch', 'Set, chest drain, 24 Ch, with trocar and blade', 'set', 'box/5', 'V', 'FEN', 28, 1095, 'E1 0.12 p, C1 0.1 p'],
    ['DN-011', 'Chest drain bottle', 'Bottle, chest drainage, underwater seal, 2 l', 'each', 'case/6', 'E', 'FEN', 14.5, 1825, 'C1 0.3 p, B1 0.18 p'],
    ['DN-020', 'Wound drain 10 Ch', 'Drain, wound, low vacuum, 10 Ch, with bottle', 'set', 'box/10', 'E', 'FEN', 9.2, 1460, 'R1 1.7 w'],
    ['DN-021', 'Wound drain bottle 400 ml', 'Bottle, wound drainage, vacuum, 400 ml', 'each', 'box/20', 'D', 'FEN', 3.8, 1825, 'B1 1 n'],
    ['DN-030', 'Corrugated drain', 'Drain, corrugated, silicone, 30 mm × 25 cm', 'each', 'box/10', 'D', 'MAR', 4.1, 1460, 'R1 0.2 s'],
  ],
}
