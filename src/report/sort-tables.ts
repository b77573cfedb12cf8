/** Makes tables sortable in the page: one small script, which may stand there more than once. */

/** Kept as text, because it runs in the browser and not here. Rows go by the `data-key` of their cells; empty ones stay last. */
const sortTables = `function () {
  for (const table of document.querySelectorAll('table.sb-sortable:not(.sb-sorts)')) {
    table.classList.add('sb-sorts');
    const heads = [...table.tHead.rows[0].cells];
    heads.forEach((head, column) => {
      const by = head.dataset.sortBy;
      if (!by) return;
      const button = document.createElement('button');
      button.type = 'button';
      button.title = 'sort by ' + head.textContent;
      button.append(...head.childNodes);
      head.append(button);
      button.addEventListener('click', () => {
        const usual = by === 'more' ? 'descending' : 'ascending';
        const order = head.getAttribute('aria-sort') !== usual ? usual : usual === 'ascending' ? 'descending' : 'ascending';
        for (const other of heads) other.removeAttribute('aria-sort');
        head.setAttribute('aria-sort', order);
        const up = order === 'ascending' ? 1 : -1;
        const keyOf = (body) => body.rows[0].cells[column].dataset.key;
        const compare = (a, b) => {
          const [one, other] = [keyOf(a), keyOf(b)];
          if (one === undefined || other === undefined) return (one === undefined) - (other === undefined);
          return up * (by === 'text' ? one.localeCompare(other, 'en', { numeric: true }) : Number(one) - Number(other));
        };
        table.append(...[...table.tBodies].sort(compare));
      });
    });
  }
  const unfold = () => {
    const aim = document.getElementById(location.hash.slice(1));
    const folded = aim && aim.closest('.sb-more details');
    if (!folded) return;
    folded.open = true;
    aim.scrollIntoView();
  };
  window.addEventListener('hashchange', unfold);
  unfold();
}`;

export const sortTablesHtml: string = `<script>(${sortTables})()</script>`;
