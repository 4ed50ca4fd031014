/** Whether a host name means this machine and nobody else can reach it. */
export const isLoopback = (host: string): boolean => ['localhost', '::1', '[::1]'].includes(host) || /^127\.\d+\.\d+\.\d+$/.test(host)
