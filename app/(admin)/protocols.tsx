// Door: shows ProtocolsScreen, no more.
export { ProtocolsScreen as default } from '@/components/features/protocol/ProtocolsScreen';
