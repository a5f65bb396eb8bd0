import { renderToStaticMarkup } from "react-dom/server";
import { MemoryRouter } from "react-router";
import { expect, test } from "vitest";
import { DataTable, type Column } from "./data-table";
import { Pagination } from "./pagination";

interface Row {
  id: string;
  name: string;
}

const columns: Column<Row>[] = [
  { id: "name", header: "Name", cell: (row) => row.name, sortable: true, primary: true },
  { id: "id", header: "Number", cell: (row) => row.id, numeric: true },
];

function render(element: React.ReactElement, at = "/queue?q=lamp&page=2") {
  return renderToStaticMarkup(<MemoryRouter initialEntries={[at]}>{element}</MemoryRouter>).replaceAll(
    "&amp;",
    "&",
  );
}

test("a sortable heading links to the other order, keeps the search and says how it is sorted now", () => {
  const html = render(
    <DataTable
      caption="Units"
      columns={columns}
      rows={[{ id: "7", name: "Lamp" }]}
      rowKey={(row) => row.id}
      rowHref={(row) => `/units/${row.id}`}
      sort={{ by: "name", direction: "asc" }}
    />,
  );
  expect(html).toContain('href="/queue?q=lamp&sort=name&dir=desc"');
  expect(html).toContain('aria-sort="ascending"');
  expect(html).toContain('href="/units/7"');
  expect(html.match(/<th[^>]*scope="col"/g)).toHaveLength(2);
  expect(html).not.toContain("sort=id");
});

test("what is shown for no rows stands in place of the table", () => {
  const html = render(
    <DataTable
      caption="Units"
      columns={columns}
      rows={[]}
      rowKey={(row) => row.id}
      empty={<p>None wait</p>}
    />,
  );
  expect(html).toBe("<p>None wait</p>");
});

test("pages: the first has no previous, the last no next, and page 1 needs no parameter", () => {
  const first = render(<Pagination page={1} pageSize={20} total={41} />, "/queue?q=lamp");
  expect(first).not.toContain('rel="prev"');
  expect(first).toContain('href="/queue?q=lamp&page=2"');
  expect(first).toContain("1 to 20 of 41");
  const second = render(<Pagination page={2} pageSize={20} total={41} />);
  expect(second).toContain('href="/queue?q=lamp"');
  const last = render(<Pagination page={3} pageSize={20} total={41} />);
  expect(last).not.toContain('rel="next"');
  expect(last).toContain("41 to 41 of 41");
  expect(render(<Pagination page={1} pageSize={20} total={0} />)).toBe("");
});

test("a page after the last one leads back to the last", () => {
  const beyond = render(<Pagination page={9} pageSize={20} total={41} />, "/queue?page=9");
  expect(beyond).toContain('href="/queue?page=3"');
  expect(beyond).toContain("There are 41 in all");
  expect(beyond).not.toContain('rel="next"');
});
