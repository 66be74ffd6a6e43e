/** Whatever no route answers: the API's own error shape instead of a page. */
export default defineEventHandler((event) => refuse(event, 404, 'not-found', 'There is nothing here.'))
