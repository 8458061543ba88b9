// The name by which somebody is called in mails and to caregivers: what stands before the first space.

export function firstNameOf(name: string): string {
  return name.trim().split(/\s+/)[0] ?? name;
}
