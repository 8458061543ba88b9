// Door: shows CaregiversScreen, no more.
export { CaregiversScreen as default } from '@/components/features/caregiver/CaregiversScreen';
