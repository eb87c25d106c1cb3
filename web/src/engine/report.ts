// The report as the core writes it; a test holds these types against real reports. Units are in the names.

export type Status = "converged" | "flown" | "approximate" | "not_converged" | "unreachable";

export interface Constants {
  sun_gm_km3_s2: number;
  au_km: number;
  irradiance_w_m2: number;
  pressure_n_m2: number;
  sun_gravity_mm_s2: number;
  g0_m_s2: number;
}

export interface End {
  name: string;
  semi_major_axis_au: number;
  eccentricity: number;
  inclination_deg: number;
  node_deg: number;
  arg_peri_deg: number;
  mean_anomaly_deg: number | null;
  period_d: number;
}

export interface Craft {
  ac_mm_s2: number;
  lightness: number;
  efficiency: number;
  loading_g_m2: number | null;
  area_m2: number | null;
  side_m: number | null;
  mass_kg: number | null;
  delivered_kg: number | null;
}

export interface Proof {
  position_error_km: number | null;
  speed_error_m_s: number | null;
  hamiltonian_drift: number | null;
  extremals_found: number;
  second_order: "passed" | "failed" | "not_tested";
  method: string;
}

export interface Flight {
  status: Status;
  message: string | null;
  time_d: number | null;
  revolutions: number | null;
  depart: string | null;
  arrive: string | null;
  vinf_used_km_s: number | null;
  c3_km2_s2: number | null;
  vinf_arrive_km_s: number | null;
  sun_distance_min_au: number | null;
  sun_distance_max_au: number | null;
  film_temp_max_k: number | null;
  turn_rate_max_deg_d: number | null;
  jumps: { time_d: number; angle_deg: number }[];
  sail_dv_km_s: number | null;
  lead_angle_deg: number | null;
  earth_range_max_au: number | null;
  earth_view: EarthView | null;
  final_eccentricity: number | null;
  estimate: number | null;
  proof: Proof;
  branches: { time_d: number; revolutions: number; best: boolean }[];
  margin: { days_in_hand: number; mass_growth_pct: number | null; ac_in_hand_pct: number | null } | null;
}

export interface ImpulsiveWay {
  time_d: number;
  dv_depart_km_s: number;
  dv_arrive_km_s: number;
  dv_total_km_s: number;
  propellant_fraction: number;
  delivered_kg: number | null;
  phases: string;
}

export interface Impulsive {
  heliocentric: ImpulsiveWay;
  same_start_same_end: ImpulsiveWay;
  from_parking: ImpulsiveWay | null;
  from_parking_note: string | null;
  lead_angle_deg: number;
  synodic_d: number | null;
  dated: DatedTransfer | null;
  dated_same_dates: DatedTransfer | null;
}

/** A transfer of two impulses on calendar dates. */
export interface DatedTransfer {
  depart: string;
  arrive: string;
  time_d: number;
  dv_depart_km_s: number;
  dv_arrive_km_s: number;
  dv_total_km_s: number;
  c3_km2_s2: number;
  vinf_arrive_km_s: number;
  propellant_fraction: number;
  delivered_kg: number | null;
  revolutions: number;
  direction: "prograde" | "retrograde";
  phase_depart_deg: number | null;
  span: string;
  phases: string;
}

/** A dated flight as seen from the Earth, and how the bodies stand. */
export interface EarthView {
  range_max_au: number;
  range_arrive_au: number;
  light_time_max_s: number;
  sun_earth_craft_min_deg: number | null;
  phase_depart_deg: number;
  phase_arrive_deg: number;
}

export interface Program {
  name: string;
  version: string;
  constants: Constants;
}

export interface Report {
  program: Program;
  link: string;
  sentence: string;
  ends: { from: End; to: End };
  craft: Craft;
  flight: Flight;
  impulsive: Impulsive;
  cautions: string[];
}

/** One published check as the core ran it. */
export interface CheckRow {
  name: string;
  source: string;
  mark: string;
  unit: string;
  expected: number;
  found: number | null;
  tolerance: number;
  passed: boolean;
}

/** One key of the scenario link. */
export interface KeyInfo {
  key: string;
  label: string;
  unit: string;
  range: string;
  min: number | null;
  max: number | null;
  words: string[];
  /** `none` where nothing stands for the key left out. */
  default: string;
  help: string;
}

/** One thing wrong with a scenario. */
export interface LinkError {
  key: string;
  value: string;
  rule: string;
}

export interface Example {
  name: string;
  link: string;
  about: string;
}

/** One flight of a study. */
export interface StudyRow {
  depart: string;
  ac_mm_s2: number;
  area_m2: number | null;
  status: Status;
  time_d: number | null;
  arrive: string | null;
  revolutions: number | null;
  branches: number;
  law: "kept" | "broken" | "not_tested";
  link: string;
}

/** A departure worth looking at. */
export interface Pick {
  kind: "shortest" | "earliest";
  depart: string;
  ac_mm_s2: number;
  time_d: number | null;
  arrive: string | null;
  at_edge: boolean;
  leave_by: string;
  slips: { slip_d: number; arrive_later_d: number; time_change_d: number }[];
  link: string;
}

export interface StudyAxis {
  field: string;
  label: string;
  unit: string;
  values: (number | string)[];
}

/** A study as far as it has come; dates vary fastest along the rows. */
export interface StudyReport {
  study: string;
  link: string;
  program: Program;
  axes: StudyAxis[];
  rows: StudyRow[];
  best: Pick[];
  notes: string[];
}
