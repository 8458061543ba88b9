// Door: shows SiteScreen, no more.
export { SiteScreen as default } from '@/components/features/site/SiteScreen';
