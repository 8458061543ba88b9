// Door: shows DemoMailScreen, no more.
export { DemoMailScreen as default } from '@/components/features/demo/DemoMailScreen';
