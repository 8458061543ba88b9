// The gate of the screens that serve clinician, coordinator and monitor.
export { RoleGate as default } from '@/components/layout/RoleGate';
