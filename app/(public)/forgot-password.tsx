// Door: shows ForgotPasswordScreen, no more.
export { ForgotPasswordScreen as default } from '@/components/features/account/ForgotPasswordScreen';
