/** Prints rows (objects with the same keys) as an aligned table under a title. */
export function printTable(title, rows) {
  console.log(title)
  const columns = Object.keys(rows[0] ?? {})
  const cells = [columns, ...rows.map(row => columns.map(column => show(row[column])))]
  const widths = columns.map((_, i) => Math.max(...cells.map(row => row[i].length)))
  for (const [index, row] of cells.entries()) {
    console.log(`  ${row.map((cell, i) => i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i])).join('   ')}`)
    if (index === 0) console.log(`  ${widths.map(width => '-'.repeat(width)).join('   ')}`)
  }
  console.log()
}

function show(value) {
  if (typeof value !== 'number') return String(value)
  if (Number.isInteger(value)) return value.toLocaleString('en')
  return value.toFixed(value < 10 ? 3 : 1)
}

/** Median and spread of a list of numbers. */
export function spread(values) {
  const sorted = [...values].sort((a, b) => a - b)
  const at = share => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]
  return { median: at(0.5), p05: at(0.05), p95: at(0.95), p99: at(0.99) }
}
