import { XMLBuilder } from 'fast-xml-parser';
import type { Mesh } from '../../mesher/index.ts';

/** Cell type number of a triangle in VTK files. */
const triangleCell = 5;

/**
 * A triangulation as VTK XML unstructured grid (.vtu), ascii: points, triangles, region set per triangle.
 *
 * Source: VTK file formats, XML UnstructuredGrid (open standard of the VTK documentation).
 */
export function vtuText(mesh: Mesh): string {
  const nodes = mesh.nodes.length / 2;
  const triangles = mesh.triangles.length / 3;
  const points: string[] = [];
  for (let i = 0; i < nodes; i++) points.push(`${mesh.nodes[2 * i]} ${mesh.nodes[2 * i + 1]} 0`);
  const offsets = Array.from({ length: triangles }, (_, t) => 3 * (t + 1));
  const array = (type: string, name: string, components: number, text: string) => ({
    '@type': type,
    '@Name': name,
    '@NumberOfComponents': String(components),
    '@format': 'ascii',
    '#text': text,
  });
  const builder = new XMLBuilder({ ignoreAttributes: false, attributeNamePrefix: '@', format: true });
  return builder.build({
    '?xml': { '@version': '1.0' },
    VTKFile: {
      '@type': 'UnstructuredGrid',
      '@version': '1.0',
      '@byte_order': 'LittleEndian',
      UnstructuredGrid: {
        Piece: {
          '@NumberOfPoints': String(nodes),
          '@NumberOfCells': String(triangles),
          Points: { DataArray: array('Float64', 'Points', 3, points.join('\n')) },
          Cells: {
            DataArray: [
              array('Int32', 'connectivity', 1, mesh.triangles.join(' ')),
              array('Int32', 'offsets', 1, offsets.join(' ')),
              array('UInt8', 'types', 1, new Array(triangles).fill(triangleCell).join(' ')),
            ],
          },
          CellData: { DataArray: array('Int32', 'region set', 1, mesh.regionSet.join(' ')) },
        },
      },
    },
  });
}
