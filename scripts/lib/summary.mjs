const column = (text, width) => text.padEnd(width);

function table(rows) {
  const widths = [0, 1].map((n) => Math.max(...rows.map((row) => (row[n] ?? '').length)));
  return rows.map((row) =>
    `  ${row.map((cell, n) => (n < 2 ? column(cell ?? '', widths[n]) : cell)).join('  ')}`.trimEnd(),
  );
}

/** What a person needs to use a running Benchbell: addresses, and the demo's sign-ins. */
export function summary({ addresses, demo, logDir }) {
  const full = (where) => (where?.startsWith('/') ? addresses.web + where : where);
  const shops = (demo?.shops ?? []).flatMap(({ name, slug }) => [
    [name, 'welcome', `${addresses.web}/s/${slug}`],
    ['', 'sign in', `${addresses.web}/s/${slug}/sign-in`],
  ]);
  const fakes = addresses.sms
    ? [
        ['Phones', 'texts', addresses.sms],
        ['Inbox', 'mail', addresses.mail],
      ]
    : [];
  const own = demo
    ? []
    : [
        ['Server', '', addresses.web],
        ['First shop', '', 'npm run shop:create'],
      ];
  const lines = ['', ...table([...own, ...shops, ...fakes])];
  if (demo?.signIns?.length) {
    lines.push(
      '',
      '  Demo sign-ins',
      ...table(demo.signIns.map(({ role, where, how }) => [role, full(where) ?? '', how])),
    );
  }
  lines.push('', `  Logs in ${logDir}. Ctrl-C or "npm run stop" ends it.`, '');
  return lines.join('\n');
}
