// The one door at `/`: sends each role to its first page.
export { HomeDoor as default } from '@/components/layout/HomeDoor';
