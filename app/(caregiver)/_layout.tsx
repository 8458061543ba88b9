// The gate of the screens that serve a caregiver.
export { RoleGate as default } from '@/components/layout/RoleGate';
