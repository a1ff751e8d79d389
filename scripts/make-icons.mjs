/**
 * Writes src/app/ui/icons/icon-shapes.ts from Google's Material Symbols (outlined, weight 300, Apache License 2.0).
 * Run it only to add an icon: put its name in the list below (`ours=theirs` where the names differ), then `node scripts/make-icons.mjs`, and commit the result.
 */
import { execFileSync } from 'node:child_process';
import { copyFileSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const source = '@material-symbols/svg-300@0.47.5';
const names = `
  add archive arrow_back arrow_downward arrow_forward arrow_upward attach_file autorenew block bookmark calendar_month chat check
  check_circle chevron_left chevron_right close cloud_done cloud_off cloud_upload comment content_copy dark_mode delete
  description download drag_indicator edit error event
  expand_less=keyboard_arrow_up expand_more=keyboard_arrow_down keyboard_arrow_down keyboard_arrow_up filter_list flag fullscreen gavel group help
  history hourglass_empty info key keyboard  light_mode link lock logout mail menu more_vert open_in_new person person_add
  photo_camera picture_as_pdf play_arrow print refresh remove replay rotate_right save schedule science search send settings
  stop swap_vert tune undo upload visibility visibility_off warning zoom_in zoom_out
`
  .trim()
  .split(/\s+/);

const folder = mkdtempSync(join(tmpdir(), 'icons-'));
const archive = execFileSync('npm', ['pack', source, '--silent'], { cwd: folder, encoding: 'utf8' }).trim();
execFileSync('tar', ['xzf', archive], { cwd: folder });

const shapes = names.map((entry) => {
  const [name, theirs = name] = entry.split('=');
  const svg = readFileSync(join(folder, 'package', 'outlined', `${theirs}.svg`), 'utf8');
  const paths = [...svg.matchAll(/<path d="([^"]+)"\s*\/>/g)].map((match) => match[1]);
  if (paths.length !== 1 || !svg.includes('viewBox="0 -960 960 960"'))
    throw new Error(`${name} is drawn unlike the others`);
  return `  ${name}: '${paths[0]}',`;
});

const target = join(import.meta.dirname, '..', 'src', 'app', 'ui', 'icons');
copyFileSync(join(folder, 'package', 'LICENSE'), join(target, 'LICENSE.txt'));
writeFileSync(
  join(target, 'icon-shapes.ts'),
  `// Made by scripts/make-icons.mjs from Material Symbols by Google, Apache License 2.0 (LICENSE.txt). Do not edit.

/** The outlines of the icons in use, in a view box of 0 -960 960 960. */
export const iconShapes = {
${shapes.join('\n')}
} as const;

/** An icon's name, for \`svgIcon\`. */
export type IconName = keyof typeof iconShapes;
`,
);
rmSync(folder, { recursive: true });
