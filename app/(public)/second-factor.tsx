// Door: shows SecondFactorScreen, no more.
export { SecondFactorScreen as default } from '@/components/features/account/SecondFactorScreen';
