// The gate of the screens that serve staff of a site.
export { RoleGate as default } from '@/components/layout/RoleGate';
