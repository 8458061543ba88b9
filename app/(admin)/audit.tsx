// Door: shows AuditScreen, no more.
export { AuditScreen as default } from '@/components/features/audit/AuditScreen';
