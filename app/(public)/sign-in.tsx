// Door: shows SignInScreen, no more.
export { SignInScreen as default } from '@/components/features/account/SignInScreen';
