export const JOB_SCHEMA = 'pgboss'
