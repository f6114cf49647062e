/** All units of a property in one table: sorted, filtered, a hundred rows a page; each row's day strip says the same in a sentence. */
import { useQuery } from '@tanstack/react-query'
import {
  columnFilteringFeature,
  createColumnHelper,
  createFilteredRowModel,
  createPaginatedRowModel,
  createSortedRowModel,
  filterFns,
  globalFilteringFeature,
  rowPaginationFeature,
  rowSortingFeature,
  sortFns,
  tableFeatures,
  useTable,
} from '@tanstack/react-table'
import { useState } from 'react'
import { apiGet } from '#lib/http/client.ts'
import type { UnitLine, UnitsPage } from '#lib/unit/view.ts'
import { DayStrip } from '../strip/DayStrip.tsx'
import { WithQueries } from '../ui/WithQueries.tsx'

const PAGE_ROWS = 100
const STRIP_PX = 260

const features = tableFeatures({
  rowSortingFeature,
  columnFilteringFeature,
  globalFilteringFeature,
  rowPaginationFeature,
  sortedRowModel: createSortedRowModel(),
  filteredRowModel: createFilteredRowModel(),
  paginatedRowModel: createPaginatedRowModel(),
  sortFns,
  filterFns,
})
const helper = createColumnHelper<typeof features, UnitLine>()
const columns = helper.columns([
  helper.accessor('code', {
    header: 'Unit',
    sortFn: 'alphanumeric',
    cell: ({ row }) => (
      <a className="font-black" href={row.original.href}>
        {row.original.code}
      </a>
    ),
  }),
  helper.accessor('urgency', { id: 'state', header: 'Tomorrow', cell: ({ row }) => <State unit={row.original} /> }),
  helper.accessor('startByMin', { id: 'startBy', header: 'Start by', sortUndefined: 'last', cell: ({ row }) => row.original.startBy }),
  helper.accessor('readyBy', { header: 'Ready by' }),
  helper.accessor('controller', { header: 'Timed by' }),
  helper.accessor('tenant', { header: 'Tenant' }),
  helper.accessor((unit) => unit.state, {
    id: 'day',
    header: 'Day',
    enableSorting: false,
    cell: ({ row }) => (row.original.strip ? <DayStrip day={row.original.strip} widthPx={STRIP_PX} labels={false} /> : null),
  }),
])
const NO_UNITS: UnitLine[] = []

function State({ unit }: { readonly unit: UnitLine }) {
  const bad = unit.urgency <= 1
  return (
    <span className={bad ? 'border-l-4 border-crimson pl-2 font-bold text-crimson' : unit.urgency === 3 ? 'text-verdigris' : 'text-soft'}>
      {unit.state}
    </span>
  )
}

interface Props {
  readonly url: string
}

function UnitsTable({ url }: Props) {
  const { data, error, isPending, refetch } = useQuery({ queryKey: ['units', url], queryFn: () => apiGet<UnitsPage>(url) })
  const [filter, setFilter] = useState('')
  const table = useTable({
    features,
    columns,
    data: (data?.units as UnitLine[] | undefined) ?? NO_UNITS,
    state: { globalFilter: filter },
    onGlobalFilterChange: setFilter,
    globalFilterFn: 'includesString',
    initialState: { sorting: [{ id: 'code', desc: false }], pagination: { pageIndex: 0, pageSize: PAGE_ROWS } },
  })
  if (isPending) return <p role="status">Reading the units…</p>
  if (error) {
    return (
      <div role="alert" className="border-l-4 border-crimson bg-sheet px-4 py-3">
        <p>{error.message}</p>
        <button className="button mt-2" onClick={() => void refetch()}>
          Try again
        </button>
      </div>
    )
  }
  const { rows } = table.getRowModel()
  const pages = table.getPageCount()
  const { pageIndex } = table.state.pagination
  return (
    <div className="flex flex-col gap-4">
      <label className="flex max-w-[24rem] flex-col gap-1">
        <span className="font-bold">Find</span>
        <input
          className="field"
          type="search"
          value={filter}
          onChange={(event) => setFilter(event.target.value)}
          placeholder="unit, tenant, timer or state"
        />
      </label>
      <p role="status" className="text-soft">
        {table.getFilteredRowModel().rows.length} of {data.units.length} units
      </p>
      <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Units">
        <table className="plain-table min-w-[60rem]">
          <thead>
            {table.getHeaderGroups().map((group) => (
              <tr key={group.id}>
                {group.headers.map((header) => {
                  const sorted = header.column.getIsSorted()
                  return (
                    <th key={header.id} scope="col" aria-sort={sorted === 'asc' ? 'ascending' : sorted === 'desc' ? 'descending' : 'none'}>
                      {header.column.getCanSort() ? (
                        <button className="cursor-pointer font-bold" onClick={header.column.getToggleSortingHandler()}>
                          <table.FlexRender header={header} />
                          <span aria-hidden="true"> {sorted === 'asc' ? '↑' : sorted === 'desc' ? '↓' : ''}</span>
                        </button>
                      ) : (
                        <table.FlexRender header={header} />
                      )}
                    </th>
                  )
                })}
              </tr>
            ))}
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.id}>
                {row.getAllCells().map((cell) => (
                  <td key={cell.id}>
                    <table.FlexRender cell={cell} />
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {rows.length === 0 && <p>No unit matches “{filter}”. Clear the search to see all.</p>}
      {pages > 1 && (
        <nav aria-label="Pages of units" className="flex items-center gap-3">
          <button className="button" disabled={!table.getCanPreviousPage()} onClick={() => table.previousPage()}>
            Before
          </button>
          <span>
            Page {pageIndex + 1} of {pages}
          </span>
          <button className="button" disabled={!table.getCanNextPage()} onClick={() => table.nextPage()}>
            Next
          </button>
        </nav>
      )}
    </div>
  )
}

export function UnitsTableIsland(props: Props) {
  return (
    <WithQueries>
      <UnitsTable {...props} />
    </WithQueries>
  )
}
