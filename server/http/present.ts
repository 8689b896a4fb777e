/** Milliseconds since 1970 as the API tells times. */
export function time(milliseconds: number): string {
  return new Date(milliseconds).toISOString();
}

export function timeOrNull(milliseconds: number | null): string | null {
  return milliseconds === null ? null : time(milliseconds);
}
