/** What a sawyer may offer beside sawing. */
export const SERVICES = [
  { code: 'edging', name: 'Edging' },
  { code: 'resaw', name: 'Resawing' },
  { code: 'kiln', name: 'Kiln drying' },
  { code: 'delivery', name: 'Delivery' },
  { code: 'slab-flattening', name: 'Slab flattening' },
  { code: 'metal-detecting', name: 'Metal detecting' },
] as const;

export type ServiceCode = (typeof SERVICES)[number]['code'];

/** The trade's word for a service; the code itself when it is unknown. */
export const serviceName = (code: string): string => SERVICES.find((service) => service.code === code)?.name ?? code;
