// Door: shows SetUpScreen, no more.
export { SetUpScreen as default } from '@/components/features/session/SetUpScreen';
