/** Every array of the container with its shape, type, role and the reason for the role. */
import type { ArchiveContents, Reading } from '#contract/reading.ts';

export function ArrayRoles({ reading, contents }: { reading: Reading; contents: ArchiveContents }) {
  const roleOf = new Map(reading.roles.map((each) => [each.path, each]));
  return (
    <section aria-labelledby="arrays-title" className="space-y-3">
      <h2 id="arrays-title" className="text-xl">Arrays in the archive</h2>
      <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Arrays in the archive">
        <table className="w-full min-w-[44rem] text-sm">
          <thead className="border-b border-rule-strong text-left">
            <tr><th className="py-2 pr-4 font-medium">Array</th><th className="pr-4 font-medium">Shape</th><th className="pr-4 font-medium">Type</th><th className="pr-4 font-medium">Role</th><th className="font-medium">Why</th></tr>
          </thead>
          <tbody className="divide-y divide-rule">
            {contents.arrays.slice(0, 500).map((array) => (
              <tr key={array.path}>
                <td className="py-2 pr-4 font-mono">{array.path}</td>
                <td className="pr-4 tabular-nums">{array.shape.length === 0 ? 'scalar' : array.shape.join(' x ')}</td>
                <td className="pr-4 font-mono text-xs">{array.dtype}{array.byteOrder === 'big' ? ', big-endian' : ''}{array.order === 'F' ? ', Fortran order' : ''}</td>
                <td className="pr-4">{roleOf.get(array.path)?.role ?? 'ignored'}</td>
                <td className="text-ink-soft">{roleOf.get(array.path)?.why ?? ''}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {contents.arrays.length > 500 && <p className="text-sm text-ink-soft">The first 500 of {contents.arrays.length} arrays.</p>}
    </section>
  );
}
