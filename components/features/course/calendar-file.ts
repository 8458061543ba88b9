// The planned times as an iCalendar file (RFC 5545). Titles are private: nothing in it says what the time is for.

import { saveFile } from '@/components/runtime/save-file';
import type { CourseMark } from '@/shared/contracts/course';

/** `2026-05-12T16:00:00.000Z` → `20260512T160000Z` */
function stamp(instant: string): string {
  return instant.replace(/[-:]/g, '').replace(/\.\d+/, '');
}

/** Commas, semicolons and backslashes are escaped in text (RFC 5545 §3.3.11). */
function escaped(text: string): string {
  return text.replace(/([\\,;])/g, '\\$1').replace(/\r?\n/g, '\\n');
}

/**
 * The text of the file, lines ended by CRLF.
 * @param marks planned sessions, each with its window
 * @param title of every entry
 * @param now instant for DTSTAMP
 */
export function calendarOf(marks: readonly CourseMark[], title: string, now: string): string {
  const entries = marks.flatMap((mark) => [
    'BEGIN:VEVENT',
    `UID:${mark.plannedSessionId}@rampwell.example`,
    `DTSTAMP:${stamp(now)}`,
    `DTSTART:${stamp(mark.windowFrom)}`,
    `DTEND:${stamp(mark.windowTo)}`,
    `SUMMARY:${escaped(title)}`,
    'CLASS:PRIVATE',
    'TRANSP:TRANSPARENT',
    'END:VEVENT',
  ]);
  return ['BEGIN:VCALENDAR', 'VERSION:2.0', 'PRODID:-//Rampwell//Planned times//EN', ...entries, 'END:VCALENDAR', ''].join('\r\n');
}

/** Hands the file to the browser. */
export function saveCalendar(marks: readonly CourseMark[], title: string, now: string): void {
  saveFile('planned-times.ics', 'text/calendar', calendarOf(marks, title, now));
}
