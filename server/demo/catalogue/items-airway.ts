import type { ItemRow } from './item-row.ts'

// One item, one line.
// prettier-ignore
export const airway: Record<string, ItemRow[]> = {
  'Airway and breathing': [
    ['AW-010', 'Oxygen mask, adult', 'Mask, oxygen, medium concentration, adult, with tubing', 'each', 'case/50', 'E', 'CS', 0.72, 1825, 'A1 1.9 n, B1 1.2 n'],
    ['AW-011', 'Oxygen mask, child', 'Mask, oxygen, medium concentration, child, with tubing', 'each', 'case/50', 'E', 'CS', 0.74, 1825, 'H1 1.3 n, E1 0.7 p'],
    ['AW-012', 'Non-rebreathing mask, adult', 'Mask, oxygen, with reservoir bag, adult, with tubing', 'each', 'case/24', 'V', 'FEN', 1.28, 1825, 'A1 1.5 n, B1 0.35 p'],
    ['AW-013', 'Venturi mask kit', 'Mask, Venturi, adult, with six valves', 'set', 'box/20', 'E', 'FEN', 2.1, 1825, 'A1 0.7 n, E1 0.9 p'],
    ['AW-014', 'Nasal cannula, adult', 'Cannula, nasal, adult, curved prongs, 2.1 m', 'each', 'case/50', 'E', 'CS', 0.38, 1825, 'B1 2.4 n'],
    ['AW-015', 'Nebuliser mask, adult', 'Nebuliser with mask, adult, with tubing', 'each', 'case/25', 'E', 'CS', 1.05, 1825, 'A1 1.1 n, E1 1.6 n'],
    ['AW-016', 'Nebuliser mask, child', 'Nebuliser with mask, child, with tubing', 'each', 'case/25', 'E', 'CS', 1.05, 1825, 'H1 0.8 n'],
    ['AW-020', 'Endotracheal tube 7.0', 'Tube, endotracheal, cuffed, 7.0 mm, sterile', 'each', 'box/10', 'V', 'FEN', 1.9, 1825, 'C1 0.35 p, E1 0.3 p'],
    ['AW-021', 'Endotracheal tube 7.5', 'Tube, endotracheal, cuffed, 7.5 mm, sterile', 'each', 'box/10', 'V', 'FEN', 1.9, 1825, 'C1 0.4 p'],
    ['AW-022', 'Endotracheal tube 8.0', 'Tube, endotracheal, cuffed, 8.0 mm, sterile', 'each', 'box/10', 'V', 'FEN', 1.9, 1825, 'C1 0.35 p'],
    ['AW-025', 'Airway, oral, size 3', 'Airway, oropharyngeal, size 3, 90 mm', 'each', 'box/25', 'E', 'CS', 0.4, 1825, 'R1 2.1 w'],
    ['AW-030', 'Laryngeal mask size 4', 'Airway, supraglottic, size 4, single use', 'each', 'box/10', 'E', 'FEN', 7.8, 1825, 'R1 1.9 w, E1 0.15 p'],
    ['AW-040', 'Breathing circuit, adult', 'Circuit, breathing, adult, heated, dual limb', 'set', 'case/10', 'V', 'FEN', 21, 1825, 'C2 1.3 n'],
    ['AW-041', 'Breathing filter', 'Filter, heat and moisture exchange, adult', 'each', 'box/50', 'E', 'FEN', 1.4, 1825, 'C2 4.2 n, R1 3.8 w'],
    ['AW-042', 'Catheter mount', 'Mount, catheter, double swivel, extendable', 'each', 'box/40', 'E', 'FEN', 1.3, 1825, 'C2 1.8 n'],
    ['AW-043', 'Humidifier chamber', 'Chamber, humidifier, auto-fill, adult', 'each', 'box/10', 'E', 'FEN', 11.6, 1825, 'C2 0.9 p'],
    ['AW-050', 'Resuscitation bag, adult', 'Resuscitator, manual, adult, single use, with mask', 'each', 'box/6', 'V', 'FEN', 12.5, 1825, 'E1 0.2 p, C2 0.1 p'],
    ['AW-060', 'Tracheostomy tube 8.0', 'Tube, tracheostomy, cuffed, with inner cannula, 8.0', 'each', 'box/1', 'E', 'FEN', 38, 1825, 'C2 0.1 p'],
    ['AW-061', 'Tracheostomy inner cannula 8.0', 'Cannula, inner, for tracheostomy tube 8.0', 'each', 'box/10', 'E', 'FEN', 4.4, 1825, 'C2 1.6 n'],
    ['AW-062', 'Tracheostomy dressing', 'Dressing, tracheostomy, foam, 8 × 9 cm', 'each', 'box/25', 'D', 'FEN', 1.6, 1095, 'C2 1.7 n'],
    ['AW-070', 'High-flow nasal cannula M', 'Cannula, nasal, high flow, medium', 'each', 'box/20', 'E', 'FEN', 13.2, 1825, 'C2 1.1 n'],
  ],
  Suction: [
    ['SU-010', 'Suction catheter 10 Ch', 'Catheter, suction, 10 Ch, with vacuum control', 'each', 'box/100', 'E', 'CS', 0.18, 1825, 'H1 1.8 n, C2 2.1 n'],
    ['SU-012', 'Suction catheter 12 Ch', 'Catheter, suction, 12 Ch, with vacuum control', 'each', 'box/100', 'E', 'CS', 0.18, 1825, 'A1 2.2 n, C2 6.2 n'],
    ['SU-014', 'Suction catheter 14 Ch', 'Catheter, suction, 14 Ch, with vacuum control', 'each', 'box/25', 'V', 'CS', 0.19, 1825, 'A1 1.6 n, C2 4.8 n'],
    ['SU-020', 'Closed suction system 14 Ch', 'System, suction, closed, 14 Ch, 72 h', 'each', 'box/10', 'E', 'FEN', 16.5, 1825, 'C2 1.4 n'],
    ['SU-030', 'Yankauer sucker', 'Sucker, Yankauer, with vent, sterile', 'each', 'box/50', 'V', 'CS', 0.55, 1825, 'E1 1.9 n, C2 1.5 p'],
    ['SU-040', 'Suction tubing 3 m', 'Tubing, suction, 7 mm × 3 m, sterile', 'each', 'case/25', 'E', 'CS', 1.1, 1825, 'R1 5 w, C2 1.2 p'],
    ['SU-050', 'Suction liner 2 l', 'Liner, suction, 2 l, with gel', 'each', 'case/50', 'E', 'CS', 1.9, 0, 'R1 6 w, C2 2.4 n'],
  ],
  Monitoring: [
    ['MO-010', 'Electrode pad', 'Electrode, monitoring, foam, adult', 'pack', 'box/10', 'E', 'CS', 2.1, 730, 'A1 0.9 p, E1 2.2 n'],
    ['MO-011', 'Electrode, neonatal', 'Electrode, monitoring, soft cloth, small', 'pack', 'box/10', 'E', 'CS', 3.1, 730, 'H1 0.35 p'],
    ['MO-020', 'Defibrillator pads, adult', 'Pads, defibrillation, adult, pair', 'pair', 'box/10', 'V', 'FEN', 19.5, 730, 'E1 0.3 p, C2 0.14 p'],
    ['MO-021', 'Defibrillator pads, child', 'Pads, defibrillation, child, pair', 'pair', 'box/10', 'V', 'FEN', 21, 730, 'H1 0.03 p'],
    ['MO-030', 'Saturation probe, adult', 'Sensor, oxygen saturation, adhesive, adult', 'each', 'box/24', 'E', 'MAR', 6.8, 1095, 'C2 1.1 n'],
    ['MO-031', 'Saturation probe, child', 'Sensor, oxygen saturation, adhesive, child', 'each', 'box/24', 'E', 'MAR', 7.1, 1095, 'H1 0.6 n'],
    ['MO-040', 'Thermometer cover', 'Cover for ear thermometer', 'box', 'case/10', 'D', 'CS', 2.6, 0, 'A1 0.7 p, B1 0.6 p'],
    ['MO-050', 'ECG paper roll', 'Paper, ECG, 210 mm, roll', 'roll', 'box/10', 'D', 'MAR', 4.2, 0, 'E1 0.22 p'],
    ['MO-060', 'Blood pressure cuff, adult', 'Cuff, blood pressure, adult, single patient', 'each', 'box/10', 'D', 'MAR', 4.9, 0, 'A1 0.4 n, B1 0.4 n'],
  ],
}
