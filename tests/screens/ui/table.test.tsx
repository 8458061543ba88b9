// What: a table as screen readers and keyboards meet it, on a wide screen and on a phone.
import { fireEvent, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { axe } from 'jest-axe';
import '@/components/runtime/i18n';
import { Button } from '@/components/ui/Button';
import { Table, type Column, type Sort } from '@/components/ui/Table';

interface Person {
  name: string;
  since: string;
}
const rows: Person[] = [
  { name: 'Ines Marlow', since: '3 h' },
  { name: 'Wren Asquith', since: '5 h' },
  { name: 'Pell Okoro', since: '1 day' },
];
const columns: Column<Person>[] = [
  { id: 'name', header: 'Who', cell: (row) => row.name },
  { id: 'since', header: 'Since', sortable: true, cell: (row) => row.since },
];

function resizeTo(width: number) {
  Object.defineProperty(document.documentElement, 'clientWidth', { configurable: true, value: width });
  Object.defineProperty(window, 'innerWidth', { configurable: true, value: width });
  fireEvent(window, new Event('resize'));
}

describe('on a wide screen', () => {
  beforeEach(() => resizeTo(1440));

  test('rows, heads and cells have their roles', async () => {
    const { container } = render(
      <Table caption="Worklist, 3 rows" columns={columns} rows={rows} rowKey={(row) => row.name} />,
    );
    const table = screen.getByRole('table', { name: 'Worklist, 3 rows' });
    expect(
      within(table)
        .getAllByRole('columnheader')
        .map((head) => head.textContent),
    ).toEqual(['Who', 'Since']);
    expect(
      within(table)
        .getAllByRole('rowheader')
        .map((head) => head.textContent),
    ).toEqual(rows.map((row) => row.name));
    expect(await axe(container)).toHaveNoViolations();
  });

  test('is one stop of the tab key; arrows move between rows and Enter opens one', async () => {
    const opened: string[] = [];
    render(
      <Table
        caption="Worklist"
        columns={columns}
        rows={rows}
        rowKey={(row) => row.name}
        onPressRow={(row) => opened.push(row.name)}
      />,
    );
    const user = userEvent.setup();
    await user.tab();
    await user.keyboard('{ArrowDown}{ArrowDown}{Enter}{Home}{Enter}');
    expect(opened).toEqual(['Pell Okoro', 'Ines Marlow']);
    await user.tab();
    expect(document.activeElement).toBe(document.body);
  });

  test('a button inside a row does its own work and does not open the row', async () => {
    const done: string[] = [];
    const withButton: Column<Person>[] = [
      ...columns,
      {
        id: 'next',
        header: 'Next',
        cell: (row) => <Button label="Review" onPress={() => done.push(`review ${row.name}`)} />,
      },
    ];
    render(
      <Table
        caption="Worklist"
        columns={withButton}
        rows={rows.slice(0, 1)}
        rowKey={(row) => row.name}
        onPressRow={(row) => done.push(`open ${row.name}`)}
      />,
    );
    const user = userEvent.setup();
    await user.click(screen.getByRole('button', { name: 'Review' }));
    await user.keyboard('{Enter}');
    expect(done).toEqual(['review Ines Marlow', 'review Ines Marlow']);
  });

  test('asks for the other order when the sorted head is pressed again', async () => {
    const asked: Sort[] = [];
    render(
      <Table
        caption="Worklist"
        columns={columns}
        rows={rows}
        rowKey={(row) => row.name}
        sort={{ columnId: 'since', direction: 'ascending' }}
        onSort={(sort) => asked.push(sort)}
      />,
    );
    expect(screen.getByRole('columnheader', { name: 'Since' }).getAttribute('aria-sort')).toBe('ascending');
    await userEvent.setup().click(screen.getByRole('button', { name: 'Since' }));
    expect(asked).toEqual([{ columnId: 'since', direction: 'descending' }]);
  });
});

test('on a phone the name of a column stands before its value', () => {
  resizeTo(390);
  render(<Table caption="Worklist" columns={columns} rows={rows} rowKey={(row) => row.name} />);
  expect(screen.getAllByRole('row').map((row) => row.textContent)).toEqual([
    'Ines MarlowSince3 h',
    'Wren AsquithSince5 h',
    'Pell OkoroSince1 day',
  ]);
});
