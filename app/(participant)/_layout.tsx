// The gate of the screens that serve a participant.
export { RoleGate as default } from '@/components/layout/RoleGate';
