import { importsOf, type ImportStatement, type SourceFile } from './source-file.ts';

interface Layer {
  /** The files it is about; the first layer that matches counts. */
  files: RegExp;
  /** What of ours they may import, apart from themselves. */
  may: RegExp[];
}

const lib = /^shared\/lib\//;
const audio = /^shared\/audio\//;
const domain = /^shared\/domain\//;
const contract = /^shared\/contract\//;
const policy = /^shared\/policy\//;
const shared = /^shared\//;

const db = /^server\/db\//;
const store = /^server\/store\//;
/** Writing so that a crash loses nothing; it knows nothing of what is stored. */
const durableFile = /^server\/store\/durable-file\.ts$/;
const jobs = /^server\/jobs\//;
const services = /^server\/services\//;
const signal = /^server\/signal\//;
const kernel = /^server\/kernel\//;
const measuring = /^server\/measuring\//;
const packaging = /^server\/packaging\//;
const importing = /^server\/importing\//;
/** A file as bytes by place, which knows nothing of what is stored either. */
const fileSource = /^server\/store\/file-source\.ts$/;
const authorize = /^server\/authorize\//;
const http = /^server\/http\//;
/** The parts of the interface that are no part of Express: the error that names a code, revisions, cursors of lists. */
const problem = /^server\/http\/(problem|revision|cursor|row-cursor)\.ts$/;
const config = /^server\/config\.ts$/;
const log = /^server\/log\.ts$/;
/** What is told to every browser while it happens. */
const activity = /^server\/jobs\/activity\.ts$/;
const deps = /^server\/deps\.ts$/;
/** What every feature stands on, as one record. */
const ground = /^server\/ground\.ts$/;
/** Where everything is put together: the files at the top of server/ and the commands. */
const composition = /^server\/([^/]+\.ts$|setup\/)/;
const foundations = [shared, db, store, jobs, services, authorize, problem, config, log];

const api = /^src\/api\//;
const composables = /^src\/composables\//;
const stores = /^src\/stores\//;
const theme = /^src\/theme\//;
const assets = /^src\/assets\//;
const components = /^src\/components\//;
const shell = /^src\/components\/app\//;
const views = /^src\/views\//;
const router = /^src\/router\//;
/** The tables and rules of the router that the navigation and the sign-in page read too; no view in them. */
const areas = /^src\/router\/(areas|guard)\.ts$/;

export const layers: Layer[] = [
  { files: lib, may: [] },
  { files: audio, may: [lib] },
  { files: domain, may: [lib, audio] },
  { files: contract, may: [lib, audio, domain] },
  { files: policy, may: [lib, audio, domain, contract] },
  { files: shared, may: [] },

  { files: signal, may: [shared] },
  { files: kernel, may: [shared, signal] },
  { files: measuring, may: [shared, signal, kernel] },
  { files: packaging, may: [shared, durableFile] },
  { files: importing, may: [shared, fileSource] },
  { files: db, may: [shared] },
  { files: store, may: [shared] },
  { files: services, may: [shared, db, store, config, log] },
  { files: jobs, may: [shared, db, config, log] },
  { files: authorize, may: [shared, db, problem] },
  { files: http, may: [shared, db, authorize, config, log] },
  { files: config, may: [shared] },
  { files: log, may: [shared, config] },
  { files: ground, may: foundations },
  { files: /^server\/features\/[^/]+\/[^/]+\.queries\.ts$/, may: [shared, db, authorize] },
  {
    files: /^server\/features\/[^/]+\/[^/]+\.routes\.ts$/,
    may: [shared, http, authorize, config, deps, activity],
  },
  {
    files: /^server\/features\/[^/]+\/[^/.]+\.ts$/,
    may: [...foundations, ground, http, signal, measuring, packaging, importing, deps],
  },
  {
    files: /^server\/features\//,
    may: [...foundations, ground, signal, measuring, packaging, importing, deps],
  },
  { files: composition, may: [/^server\//, shared] },

  { files: api, may: [shared] },
  { files: theme, may: [shared] },
  { files: stores, may: [shared, api, theme] },
  { files: composables, may: [shared, api, stores, theme] },
  { files: shell, may: [shared, components, composables, stores, theme, assets, areas] },
  { files: components, may: [shared, composables, theme, assets] },
  { files: views, may: [shared, components, composables, stores, api, theme, assets, areas] },
  { files: router, may: [shared, views, stores, composables] },
  { files: /^src\//, may: [shared, /^src\//] },
];

/** Packages that only some files may import. */
const packageRules = [
  { packages: /^node:|^fs$|^path$/, users: /^server\// },
  {
    packages: /^express$/,
    users: /^server\/(http\/|setup\/|[^/]+\.ts$|features\/[^/]+\/([^/.]+|[^/]+\.routes)\.ts$)/,
  },
  { packages: /^(drizzle-orm|better-sqlite3)(\/|$)/, users: /^server\/(db|jobs|authorize|features|setup)\// },
  { packages: /^wavesurfer\.js(\/|$)/, users: /^src\/components\/bench\/WaveformStrip\.vue$/ },
  { packages: /^tus-js-client$/, users: api },
  { packages: /^(vue|pinia|vue-router|ant-design-vue)(\/|$)/, users: /^src\// },
];
const packagesOfShared = /^(zod|@casl\/ability)(\/|$)/;

function featureOf(file: string): string | undefined {
  return /^server\/features\/([^/]+)\//.exec(file)?.[1];
}

function roleOf(file: string): string | undefined {
  return /\.(queries|service|routes|map|jobs)\.ts$/.exec(file)?.[1];
}

/** Inside a feature: queries know queries and maps, routes know the service, and nobody knows the routes. */
const rolesWithin: Record<string, string[]> = {
  queries: ['queries', 'map'],
  map: ['queries', 'map'],
  service: ['queries', 'map', 'service'],
  jobs: ['queries', 'map', 'service', 'jobs'],
  routes: ['service', 'map', 'routes'],
};

function mayFeatureImport(from: string, to: string): boolean {
  const role = roleOf(to);
  // Another feature is asked through its service, never past it; a file without a role holds rules, no access to data.
  if (featureOf(from) !== featureOf(to)) {
    return (role === 'service' || role === undefined) && roleOf(from) !== 'queries';
  }
  const allowed = rolesWithin[roleOf(from) ?? ''];
  return role === undefined || allowed === undefined || allowed.includes(role);
}

function mayImportOwn(from: string, to: string): boolean {
  const layer = layers.find(({ files }) => files.test(from));
  if (layer === undefined) return false;
  if (layer.may.some((allowed) => allowed.test(to))) return true;
  if (featureOf(from) !== undefined && featureOf(to) !== undefined) return mayFeatureImport(from, to);
  return layer.files.test(to);
}

function mayImportPackage(from: string, name: string): boolean {
  if (shared.test(from)) return packagesOfShared.test(name);
  return packageRules.every(({ packages, users }) => !packages.test(name) || users.test(from));
}

function isAllowed(from: string, { target, isPackage, isTypeOnly }: ImportStatement): boolean {
  // A service may implement what the interface asks for: that is a type and no code.
  if (isTypeOnly && roleOf(from) === 'service' && http.test(target)) return true;
  return isPackage ? mayImportPackage(from, target) : mayImportOwn(from, target);
}

/** One line for each import that crosses a layer in the wrong direction. */
export function findForbiddenImports(files: SourceFile[]): string[] {
  return files.flatMap((file) =>
    importsOf(file)
      .filter((statement) => !isAllowed(file.path, statement))
      .map(({ target }) => `${file.path} imports ${target}`),
  );
}
