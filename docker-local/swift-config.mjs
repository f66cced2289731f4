/**
 * Swift's configuration as text. Everything listens on loopback, keeps its data in the data folder and runs as the
 * current user; S3 requests are signed with the key of the data folder.
 * @typedef {{
 *   configFolder: string, devicesFolder: string, user: string, hashPrefix: string, hashSuffix: string,
 *   account: string, accountUser: string, secret: string, proxyHost: string, origins: readonly string[],
 *   ports: { proxy: number, account: number, container: number, object: number },
 * }} SwiftSettings
 */

/** Nobody listens on this port: Swift's S3 layer needs a cache to be configured, not to be there. */
const NO_CACHE = '127.0.0.1:1'

/**
 * @param {SwiftSettings} settings
 * @returns {Record<string, string>} file name to content
 */
export function swiftConfiguration(settings) {
  return {
    'swift.conf': file(['[swift-hash]', `swift_hash_path_prefix = ${settings.hashPrefix}`, `swift_hash_path_suffix = ${settings.hashSuffix}`]),
    'proxy-server.conf': proxy(settings),
    'account-server.conf': store(settings, 'account', []),
    'container-server.conf': store(settings, 'container', ['node_timeout = 30', 'conn_timeout = 5']),
    // No updater runs that would enter a late object into its container's list: wait for the entry instead.
    'object-server.conf': store(settings, 'object', ['container_update_timeout = 30', 'node_timeout = 30', 'conn_timeout = 5']),
  }
}

/** @param {SwiftSettings} settings */
function proxy(settings) {
  const origins = settings.origins.join(',')
  return file([
    '[DEFAULT]', `bind_ip = ${settings.proxyHost}`, `bind_port = ${settings.ports.proxy}`, ...common(settings),
    `cors_allow_origin = ${origins}`, 'strict_cors_mode = true', 'cors_expose_headers = etag, content-range',
    '', '[pipeline:main]',
    'pipeline = catch_errors gatekeeper healthcheck cache listing_formats s3api tempauth bulk slo dlo proxy-server',
    '', '[app:proxy-server]', 'use = egg:swift#proxy', 'account_autocreate = true', 'node_timeout = 60', 'conn_timeout = 5',
    '', '[filter:s3api]', 'use = egg:swift#s3api', 'location = us-east-1', 's3_acl = false', 'check_bucket_owner = false',
    'min_segment_size = 5242880', `cors_preflight_allow_origin = ${origins}`,
    '', '[filter:tempauth]', 'use = egg:swift#tempauth', `user_${settings.account}_${settings.accountUser} = ${settings.secret} .admin`,
    '', '[filter:cache]', 'use = egg:swift#memcache', `memcache_servers = ${NO_CACHE}`, 'set log_level = CRITICAL',
    ...['catch_errors', 'gatekeeper', 'healthcheck', 'listing_formats', 'bulk', 'slo', 'dlo'].flatMap(name => ['', `[filter:${name}]`, `use = egg:swift#${name}`]),
  ])
}

/**
 * @param {SwiftSettings} settings
 * @param {'account' | 'container' | 'object'} kind
 * @param {readonly string[]} appSettings
 */
function store(settings, kind, appSettings) {
  return file([
    '[DEFAULT]', 'bind_ip = 127.0.0.1', `bind_port = ${settings.ports[kind]}`, ...common(settings),
    `devices = ${escape(settings.devicesFolder)}`, 'mount_check = false', 'disable_fallocate = true',
    '', '[pipeline:main]', `pipeline = healthcheck ${kind}-server`,
    '', `[app:${kind}-server]`, `use = egg:swift#${kind}`, ...appSettings,
    '', '[filter:healthcheck]', 'use = egg:swift#healthcheck',
  ])
}

/**
 * `workers = 0`: one process without forks, so that its process id is all there is to stop.
 * @param {SwiftSettings} settings
 */
function common(settings) {
  return ['workers = 0', `swift_dir = ${escape(settings.configFolder)}`, `user = ${settings.user}`, 'log_level = WARNING']
}

/**
 * A percent sign begins a reference in these files.
 * @param {string} value
 */
function escape(value) {
  return value.replaceAll('%', '%%')
}

/** @param {readonly string[]} lines */
function file(lines) {
  return `${lines.join('\n')}\n`
}
