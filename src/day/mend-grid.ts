import { stepMin } from './fill-problem.js';
import type { Booking, Department } from './scanners.js';

const free = 0;
const closed = -1;
const stepsADay = (24 * 60) / stepMin;

/**
 * Who holds each five minutes of each scanner's day, and of each team's: the visit's number + 1, free, or closed for good
 * (hours, breaks, what is down, people on their way in).
 */
export class MendGrid {
  private readonly cells = new Map<string, Map<string, Int16Array>>();
  private readonly teams = new Map<string, Map<string, Int16Array>>();

  constructor(department: Department) {
    for (const date of department.days)
      for (const scanner of department.scanners) {
        const row = new Int16Array(stepsADay).fill(closed);
        for (const h of scanner.hours)
          row.fill(free, Math.ceil(h.fromMin / stepMin), Math.floor(h.toMin / stepMin));
        for (const b of scanner.breaks)
          row.fill(closed, Math.floor(b.fromMin / stepMin), Math.ceil(b.toMin / stepMin));
        const days = this.cells.get(scanner.id) ?? new Map<string, Int16Array>();
        this.cells.set(scanner.id, days.set(date, row));
      }
  }

  private team(team: string, date: string): Int16Array {
    const days = this.teams.get(team) ?? new Map<string, Int16Array>();
    const row = days.get(date) ?? new Int16Array(stepsADay);
    this.teams.set(team, days.set(date, row));
    return row;
  }

  /** Takes hours and breaks away from a place. */
  open({ scannerId, date, startMin, slotMin }: Booking): void {
    this.cells
      .get(scannerId)
      ?.get(date)
      ?.fill(free, Math.floor(startMin / stepMin), Math.ceil((startMin + slotMin) / stepMin));
  }

  close(scannerId: string, date: string, fromMin: number, toMin: number): void {
    this.cells
      .get(scannerId)
      ?.get(date)
      ?.fill(closed, Math.floor(fromMin / stepMin), Math.ceil(toMin / stepMin));
  }

  closeTeam(team: string, date: string, fromMin: number, toMin: number): void {
    this.team(team, date).fill(closed, Math.floor(fromMin / stepMin), Math.ceil(toMin / stepMin));
  }

  /** Marks a place as held by a visit; -1 empties it. Only cells that are not closed change. */
  mark(place: Booking, team: string | undefined, visit: number): void {
    const from = Math.floor(place.startMin / stepMin);
    const to = Math.ceil((place.startMin + place.slotMin) / stepMin);
    const rows = [this.cells.get(place.scannerId)?.get(place.date)];
    if (team !== undefined) rows.push(this.team(team, place.date));
    for (const row of rows)
      for (let t = from; row !== undefined && t < to; t++)
        if (row[t] !== closed) row[t] = visit < 0 ? free : visit + 1;
  }

  /** Visits that stand in the way of a place, or undefined when something closed does or more than `most` do. */
  inTheWay(place: Booking, team: string | undefined, most: number): readonly number[] | undefined {
    const from = Math.floor(place.startMin / stepMin);
    const to = Math.ceil((place.startMin + place.slotMin) / stepMin);
    const met: number[] = [];
    const rows = [this.cells.get(place.scannerId)?.get(place.date)];
    if (team !== undefined) rows.push(this.team(team, place.date));
    for (const row of rows) {
      if (row === undefined || to > stepsADay) return undefined;
      for (let t = from; t < to; t++) {
        const held = row[t]!;
        if (held === closed) return undefined;
        if (held === free || met.includes(held - 1)) continue;
        if (met.length === most) return undefined;
        met.push(held - 1);
      }
    }
    return met;
  }
}
