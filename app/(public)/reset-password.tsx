// Door: shows ResetPasswordScreen, no more.
export { ResetPasswordScreen as default } from '@/components/features/account/ResetPasswordScreen';
