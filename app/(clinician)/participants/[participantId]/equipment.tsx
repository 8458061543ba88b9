// Door: shows EquipmentScreen, no more.
export { EquipmentScreen as default } from '@/components/features/device/EquipmentScreen';
