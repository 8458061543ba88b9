// Door: shows SessionScreen, no more.
export { SessionScreen as default } from '@/components/features/session/SessionScreen';
