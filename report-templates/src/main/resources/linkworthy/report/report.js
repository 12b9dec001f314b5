// What a page can do beyond what it says: every control here is made by this script, so a page
// without it lacks no figure. It loads nothing, keeps nothing and changes no number; numbers come
// from the page's own text. Codecs are known by data-c, their place in the study; a figure by
// data-f, the id of its row among all figures.
'use strict';
(() => {
  const MEASURES = ['PSNR', 'SSIM', 'PSNR of mean MSE', '5th percentile'];
  const CAPTIONS = ['', 'Mean SSIM', 'PSNR of the mean MSE in dB', '5th percentile of PSNR in dB'];
  const root = document.documentElement;

  const all = (query, of = document) => [...of.querySelectorAll(query)];
  const text = (node) => node.textContent.replace(/\s+/g, ' ').trim();

  /** An element with attributes; a function is a listener for clicks. */
  function make(tag, attributes, ...children) {
    const element = document.createElement(tag);
    for (const [name, value] of Object.entries(attributes)) {
      if (typeof value === 'function') {
        element.addEventListener(name, value);
      } else {
        element.setAttribute(name, value);
      }
    }
    element.append(...children);
    return element;
  }

  function button(label, click) {
    return make('button', { type: 'button', click }, label);
  }

  // ------------------------------------------------------------------ what is said aloud
  const live = make('p', { class: 'spoken', role: 'status' });
  document.body.append(live);
  const say = (words) => {
    live.textContent = words;
  };

  // ------------------------------------------------------------------ codecs by name
  const names = new Map();
  for (const row of all('#figures tr[data-c]')) {
    names.set(row.dataset.c, names.get(row.dataset.c) ?? text(row.cells[0]));
  }
  const numberOf = new Map([...names].map(([number, name]) => [name, number]));
  for (const row of all('table.list tbody tr:not([data-c])')) {
    const cell = [...row.cells].find((c) => numberOf.has(text(c)));
    if (cell) {
      row.dataset.c = numberOf.get(text(cell));
    }
  }

  // ------------------------------------------------------------------ one choice of several
  function choice(label, options, choose) {
    const buttons = options.map((option, index) =>
      button(option, () => {
        buttons.forEach((b, i) => b.setAttribute('aria-pressed', String(i === index)));
        choose(index);
        say(label + ': ' + option);
      }));
    buttons.forEach((b, i) => b.setAttribute('aria-pressed', String(i === 0)));
    return make('span', { class: 'choice', role: 'group', 'aria-label': label },
      make('span', { class: 'tag' }, label), ...buttons);
  }

  const shown = new Map();
  function setMeasure(index) {
    root.dataset.measure = String(index);
    for (const cell of all('td[data-v]')) {
      const main = cell.querySelector('.main b');
      if (!shown.has(cell)) {
        shown.set(cell, main.textContent);
      }
      main.textContent = index === 0 ? shown.get(cell) : cell.dataset.v.split(' ')[index - 1];
    }
    for (const words of all('.measure')) {
      if (!shown.has(words)) {
        shown.set(words, words.textContent);
      }
      words.textContent = index === 0 ? shown.get(words) : CAPTIONS[index];
    }
  }

  function setInterval(index) {
    root.dataset.interval = ['both', 'picture', 'noise'][index];
  }

  // ------------------------------------------------------------------ codecs shown and hidden
  const hidden = new Set();
  const heads = new Map(all('.matrix .families th').map((th) => [th, th.colSpan]));

  function showCodecs() {
    for (const element of all('[data-c]')) {
      element.toggleAttribute('hidden', hidden.has(element.dataset.c));
    }
    for (const table of all('table.matrix')) {
      const columns = all('.codecs th[data-c]', table);
      let from = 0;
      for (const head of all('.families th', table)) {
        const span = heads.get(head);
        const left = columns.slice(from, from + span).filter((c) => !hidden.has(c.dataset.c)).length;
        head.toggleAttribute('hidden', left === 0);
        head.colSpan = Math.max(1, left);
        from += span;
      }
      table.closest('.scroll').toggleAttribute('hidden', columns.every((c) => hidden.has(c.dataset.c)));
    }
    const words = (names.size - hidden.size) + ' of ' + names.size + ' codecs shown';
    all('.codecs-shown').forEach((s) => (s.textContent = words));
    say(words);
  }

  function codecList() {
    const boxes = [...names].map(([number, name]) => {
      const box = make('input', { type: 'checkbox', change: () => {
        hidden[box.checked ? 'delete' : 'add'](number);
        showCodecs();
      } });
      box.checked = true;
      return { number, name, box, label: make('label', {}, box, ' ', make('bdi', {}, name)) };
    });
    const setAll = (visible) => () => {
      for (const entry of boxes) {
        if (!entry.label.hidden) {
          entry.box.checked = visible;
          hidden[visible ? 'delete' : 'add'](entry.number);
        }
      }
      showCodecs();
    };
    const filter = make('input', { type: 'search', input: () => {
      const wanted = filter.value.toLowerCase();
      for (const entry of boxes) {
        entry.label.hidden = !entry.name.toLowerCase().includes(wanted);
      }
      say(boxes.filter((e) => !e.label.hidden).length + ' codecs listed');
    } });
    return make('details', { class: 'choose' },
      make('summary', {}, make('span', { class: 'codecs-shown' },
        names.size + ' of ' + names.size + ' codecs shown')),
      make('div', { class: 'tools' }, make('label', {}, 'List codecs with ', filter),
        button('Show listed', setAll(true)), button('Hide listed', setAll(false))),
      make('div', { class: 'boxes', role: 'group', 'aria-label': 'Codecs shown' },
        ...boxes.map((e) => e.label)));
  }

  // ------------------------------------------------------------------ lists: sort and filter
  const content = (cell) => text(cell).replace(/[\u202f\u00a0]/g, '').replace('\u2212', '-');

  function rank(cell) {
    const word = content(cell);
    const number = word.startsWith('inf') ? Infinity : parseFloat(word);
    return Number.isNaN(number) ? -Infinity : number;
  }

  function order(body, place, numeric, rising) {
    const rows = [...body.rows].map((row, index) => ({ row, index,
      key: numeric ? rank(row.cells[place]) : content(row.cells[place]) }));
    rows.sort((a, b) => {
      const before = a.key === b.key ? 0 : (a.key > b.key) === rising ? 1 : -1;
      return before === 0 ? a.index - b.index : before;
    });
    body.append(...rows.map((r) => r.row));
  }

  function sortable(table) {
    const body = table.tBodies[0];
    const recorded = [...body.rows];
    const columns = [...table.tHead.rows[0].cells];
    columns.forEach((head, place) => {
      const name = text(head);
      const press = button('', () => {
        const next = { none: 'ascending', ascending: 'descending', descending: 'none' }[
          head.getAttribute('aria-sort') ?? 'none'];
        columns.forEach((other) => other.removeAttribute('aria-sort'));
        if (next === 'none') {
          body.append(...recorded);
          say(name + ': order of the record');
        } else {
          head.setAttribute('aria-sort', next);
          order(body, place, head.classList.contains('n'), next === 'ascending');
          say('Sorted by ' + name + ', ' + next);
        }
      });
      press.className = 'sort';
      press.append(...head.childNodes);
      head.append(press);
    });
  }

  function filterOf(table) {
    const rows = [...table.tBodies[0].rows];
    const words = new Map();
    const box = make('input', { type: 'search', input: () => {
      const wanted = box.value.toLowerCase();
      for (const row of rows) {
        if (!words.has(row)) {
          words.set(row, text(row).toLowerCase());
        }
        row.classList.toggle('out', !words.get(row).includes(wanted));
      }
      say(rows.filter((row) => !row.classList.contains('out')).length + ' of ' + rows.length + ' rows');
    } });
    return make('label', {}, 'Rows with ', box);
  }

  // ------------------------------------------------------------------ tables as CSV
  /** RFC 4180; a text that a spreadsheet program would take for a formula gets an apostrophe. */
  function field(word) {
    const plain = /^[=+\-@\t]/.test(word) && Number.isNaN(Number(word)) ? "'" + word : word;
    return /[",\r\n]/.test(plain) ? '"' + plain.replace(/"/g, '""') + '"' : plain;
  }

  const visible = (element) => !element.hasAttribute('hidden') && !element.classList.contains('out');

  function csvOf(table) {
    const matrix = table.classList.contains('matrix');
    const word = (cell) => (matrix && cell.querySelector('.main b')) || cell;
    const heads = [...table.tHead.rows[matrix ? 1 : 0].cells].filter(visible).map((cell) =>
      matrix && cell.dataset.c ? names.get(cell.dataset.c) ?? text(cell) : text(cell));
    const rows = [...table.tBodies[0].rows].filter(visible).map((row) =>
      [...row.cells].filter(visible).map((cell) => content(word(cell))));
    return [heads, ...rows].map((row) => row.map(field).join(',') + '\r\n').join('');
  }

  function copy(words, what) {
    const offer = () => {
      const area = make('textarea', { rows: '12', readonly: '', 'aria-label': what });
      area.value = words;
      open(what, make('p', {}, 'The browser does not let this page copy; the text is selected.'), area);
      area.focus();
      area.select();
    };
    if (navigator.clipboard) {
      navigator.clipboard.writeText(words).then(() => say(what + ' copied'), offer);
    } else {
      offer();
    }
  }

  // ------------------------------------------------------------------ the window of the page
  const panel = make('dialog', { class: 'panel', 'aria-labelledby': 'panel-head' });
  document.body.append(panel);
  function open(title, ...children) {
    panel.replaceChildren(
      make('h2', { id: 'panel-head' }, title), ...children, button('Close', () => panel.close()));
    if (!panel.open) {
      panel.showModal();
    }
  }

  // ------------------------------------------------------------------ a figure and its trial
  function figure(id) {
    const row = document.getElementById(id);
    const heads = [...row.closest('table').tHead.rows[0].cells].map(text);
    const noise = text(row.closest('details').querySelector('summary')).replace(/: \d+ rows$/, '');
    return { row, noise, facts: [...row.cells].map((cell, i) => [heads[i], text(cell)]) };
  }

  function inWords(id) {
    const { noise, facts } = figure(id);
    return facts[0][1] + ', ' + noise + ', ' + facts[1][1] + ': '
      + facts.slice(2, 9).map(([name, value]) => name + ' ' + value).join('; ');
  }

  function openFigure(id) {
    const { noise, facts } = figure(id);
    const trial = facts[facts.length - 1][1];
    const list = make('dl', { class: 'facts' });
    for (const [name, value] of facts) {
      list.append(make('div', {}, make('dt', {}, name), make('dd', {}, value === '' ? 'none' : value)));
    }
    const parts = [list];
    if (trial !== '') {
      const command = './linkworthy replay FOLDER --trial ' + trial;
      parts.push(make('p', {}, 'Repeat its typical trial: ', make('code', {}, command), ' ',
        button('Copy the command', () => copy(command, 'Command'))));
    }
    const picture = document.querySelector('.decoded[data-f="' + id + '"]');
    parts.push(make('p', {}, picture
      ? button('Go to its pictures', () => go(picture)) : 'No picture of it is shown on this page.', ' ',
      button('Go to its row', () => go(document.getElementById(id)))));
    open(facts[0][1] + ', ' + noise + ', ' + facts[1][1], ...parts);
  }

  function go(element) {
    panel.close();
    for (let up = element; up; up = up.parentElement) {
      if (up.tagName === 'DETAILS') {
        up.open = true;
      }
    }
    element.setAttribute('tabindex', '-1');
    element.scrollIntoView({ block: 'center' });
    element.focus();
  }

  // ------------------------------------------------------------------ exact values at hand
  const tip = make('div', { class: 'tip', 'aria-hidden': 'true', hidden: '' });
  document.body.append(tip);
  function showTip(element) {
    tip.textContent = inWords(element.dataset.f);
    tip.hidden = false;
    const at = element.getBoundingClientRect();
    const own = tip.getBoundingClientRect();
    const left = Math.max(4, Math.min(at.left, root.clientWidth - own.width - 4));
    const above = at.top - own.height - 6;
    tip.style.left = left + 'px';
    tip.style.top = (above > 0 ? above : at.bottom + 6) + 'px';
  }
  const hideTip = () => {
    tip.hidden = true;
  };
  const isTipped = (node) => node instanceof Element && node.closest('td[data-f], .spot[data-f]');
  for (const kind of ['mouseover', 'focusin']) {
    document.addEventListener(kind, (event) => {
      const element = isTipped(event.target);
      if (element && element.dataset.f) {
        showTip(element);
      } else {
        hideTip();
      }
    });
  }
  document.addEventListener('scroll', hideTip, { capture: true, passive: true });
  document.addEventListener('keydown', (event) => event.key === 'Escape' && hideTip());

  // ------------------------------------------------------------------ arrow keys
  /** One of the items takes part in the order of the Tab key; arrow keys move among them. */
  function rove(box, query, moves, enter) {
    const first = box.querySelector(query);
    if (!first) {
      return;
    }
    first.setAttribute('tabindex', '0');
    box.addEventListener('keydown', (event) => {
      const from = event.target.closest(query);
      if (!from) {
        return;
      }
      if (event.key === 'Enter' || event.key === ' ') {
        event.preventDefault();
        enter(from);
        return;
      }
      const to = moves(from, event.key);
      if (to) {
        event.preventDefault();
        all('[tabindex="0"]', box).forEach((e) => e.setAttribute('tabindex', '-1'));
        to.setAttribute('tabindex', '0');
        to.focus();
      }
    });
    box.addEventListener('click', (event) => {
      const on = event.target.closest(query);
      if (on) {
        enter(on);
      }
    });
  }

  function inTable(from, key) {
    const row = from.parentElement;
    const sides = { ArrowLeft: 'previousElementSibling', ArrowRight: 'nextElementSibling' };
    if (key in sides) {
      let to = from[sides[key]];
      while (to && !(visible(to) && to.dataset.f)) {
        to = to[sides[key]];
      }
      return to;
    }
    const other = { ArrowUp: row.previousElementSibling, ArrowDown: row.nextElementSibling }[key];
    const to = other && other.cells[from.cellIndex];
    return to && to.dataset.f ? to : null;
  }

  function inPlot(from, key) {
    const step = { ArrowLeft: -1, ArrowUp: -1, ArrowRight: 1, ArrowDown: 1 }[key];
    const spots = all('.spot', from.ownerSVGElement).filter((s) => !s.closest('[hidden]'));
    return step ? spots[spots.indexOf(from) + step] : null;
  }

  // ------------------------------------------------------------------ two pictures, one slider
  function compare(strip, title) {
    const images = all('img.crop:not(.error)', strip.closest('details').querySelector('.subject'))
      .concat(all('img.crop:not(.error)', strip));
    const entries = images.map((image) => {
      const caption = image.closest('figure').querySelector('figcaption');
      const codec = caption.querySelector('b');
      return { image, name: codec ? text(codec) : text(caption).replace(/:.*/, '') };
    });
    const [under, over] = [make('img', { alt: '' }), make('img', { alt: '', class: 'over' })];
    const pick = (target, start, label) => {
      const select = make('select', { change: () => {
        const { image } = entries[select.selectedIndex];
        target.src = image.src;
        target.alt = image.alt;
      } }, ...entries.map((e) => make('option', {}, e.name)));
      select.selectedIndex = start;
      select.dispatchEvent(new Event('change'));
      return make('label', {}, label + ' ', select);
    };
    const range = make('input', { type: 'range', min: '0', max: '100', value: '50',
      'aria-label': 'Border between the two pictures, per cent from the left',
      input: () => {
        over.style.clipPath = 'inset(0 0 0 ' + range.value + '%)';
      } });
    range.dispatchEvent(new Event('input'));
    const last = entries.length - 1;
    const factor = Math.max(1, Math.floor(Math.min(384, root.clientWidth - 80) / images[0].naturalWidth));
    for (const image of [under, over]) {
      image.width = images[0].naturalWidth * factor;
      image.height = images[0].naturalHeight * factor;
    }
    range.style.width = under.width + 'px';
    open('Compare: ' + title,
      make('div', { class: 'tools' }, pick(under, Math.max(0, last - 1), 'Left'), pick(over, last, 'Right')),
      make('div', { class: 'wipe' }, under, over), range);
  }

  // ------------------------------------------------------------------ put in place
  function tools(...children) {
    return make('div', { class: 'tools' }, ...children);
  }

  root.dataset.interval = 'both';
  root.dataset.measure = '0';
  const matrices = all('table.matrix');
  const legend = document.getElementById('legend');
  if (legend && names.size > 0) {
    const bar = tools(choice('Measure', MEASURES, setMeasure),
      choice('Interval', ['both', 'picture', 'noise'], setInterval));
    if (names.size > 1) {
      bar.append(codecList());
    }
    legend.after(bar);
  }
  for (const table of matrices) {
    table.setAttribute('role', 'grid');
    table.closest('.scroll').after(tools(button('Copy as CSV', () => copy(csvOf(table), 'Table')),
      make('span', { class: 'note' }, 'A cell opens to its figures and its trial; arrow keys move.')));
    rove(table, 'td[data-f]', inTable, (cell) => openFigure(cell.dataset.f));
  }
  for (const table of all('table.list')) {
    const many = table.tBodies[0].rows.length > 1;
    const bar = tools();
    if (many) {
      sortable(table);
      bar.append(filterOf(table));
    }
    bar.append(button('Copy as CSV', () => copy(csvOf(table), 'Table')));
    table.closest('.scroll').prepend(bar);
  }
  for (const plot of all('svg')) {
    const spots = all('.spot', plot);
    if (spots.length > 0) {
      plot.setAttribute('role', 'group');
      for (const spot of spots) {
        spot.setAttribute('role', 'img');
        spot.setAttribute('aria-label', inWords(spot.dataset.f));
      }
      rove(plot, '.spot', inPlot, (spot) => openFigure(spot.dataset.f));
    }
  }
  for (const strip of all('.strip')) {
    const head = document.getElementById(strip.parentElement.getAttribute('aria-labelledby'));
    head.append(' ', button('Compare two with a slider', () => compare(strip, text(head.firstChild))));
  }
})();
