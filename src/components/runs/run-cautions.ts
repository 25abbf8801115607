import type { Process } from '@shared/contract/runs.ts';

interface Circumstances {
  process: Process | '';
  material: string;
  container: string | null;
  cooling: string | null;
  pressurePa: number | null;
}

/** Below half an atmosphere the walls of a vessel carry enough to matter when they break. */
const lowPressurePa = 50_000;

const EVACUATED = /vacuum|evacuat|dewar/i;
const CRYOGEN = /cryogen|liquid\s+(nitrogen|helium|argon|air|oxygen)|\bln2\b|\blhe\b|dry ice|dewar/i;
const METAL_PROCESSES: ReadonlySet<Process | ''> = new Set(['casting', 'welding', 'metal-printing']);

/** Short cautions for what is told about a run; none where nothing told calls for one. */
export function cautionsFor({ process, material, container, cooling, pressurePa }: Circumstances): string[] {
  const told = [material, container, cooling].join(' ');
  const isEvacuated = (pressurePa !== null && pressurePa < lowPressurePa) || EVACUATED.test(told);
  return [
    ...(isEvacuated ? ['Evacuated glass can implode.'] : []),
    ...(CRYOGEN.test(told) ? ['Cryogens displace oxygen and burn.'] : []),
    ...(METAL_PROCESSES.has(process) ? ['Molten metal and water do not meet.'] : []),
  ];
}
