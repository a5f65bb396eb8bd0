export type CalibrationState = "in-calibration" | "due-soon" | "overdue" | "not-yet" | "retired";

export interface Calibration {
  /** ISO dates (YYYY-MM-DD); both days belong to the time in which the instrument may be used. */
  calibratedOn: string;
  calibrationDue: string;
  retired: boolean;
}

const DAY = 86_400_000;
/** A calibration is announced as due during its last 30 days. */
const NOTICE_DAYS = 30;

/** Where an instrument stands on a day (YYYY-MM-DD in the workshop's time zone). */
export function calibrationState(calibration: Calibration, day: string): CalibrationState {
  if (calibration.retired) return "retired";
  if (day < calibration.calibratedOn) return "not-yet";
  if (day > calibration.calibrationDue) return "overdue";
  const daysLeft = (Date.parse(calibration.calibrationDue) - Date.parse(day)) / DAY;
  return daysLeft <= NOTICE_DAYS ? "due-soon" : "in-calibration";
}

/** Whether readings may be taken with it on that day. */
export function inCalibration(calibration: Calibration, day: string): boolean {
  const state = calibrationState(calibration, day);
  return state === "in-calibration" || state === "due-soon";
}
